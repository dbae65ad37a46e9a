import { Counter } from "~/components/shop/checkout-counter";
import { languageContext, visitorContext } from "~/context";
import { wayOf } from "~/domain/orders/checkout-form";
import { counterView } from "~/domain/orders/checkout-page.server";
import { countriesByName } from "~/domain/people/countries";
import { LANGUAGE_TAG } from "~/languages/language";
import { useMessages } from "~/languages/messages";
import { readBasket } from "~/middleware/basket.server";
import type { Route } from "./+types/basket";

/** The basket is the order slip and, beside it, the form that orders: from here it is one press to the payment page. */
export async function loader({ request, url, context }: Route.LoaderArgs) {
  return {
    view: await counterView({
      basket: await readBasket(request),
      country: url.searchParams.get("to"),
      method: wayOf(url.searchParams.get("by")),
      visitor: context.get(visitorContext),
    }),
    countries: countriesByName(LANGUAGE_TAG[context.get(languageContext)]),
  };
}

export function headers() {
  return { "Cache-Control": "private, no-store" };
}

export default function Basket({ loaderData }: Route.ComponentProps) {
  const { checkout } = useMessages();
  return (
    <>
      <title>{checkout.basketTitle}</title>
      <Counter
        view={loaderData.view}
        answer={undefined}
        countries={loaderData.countries}
        title={checkout.basketTitle}
      />
    </>
  );
}
