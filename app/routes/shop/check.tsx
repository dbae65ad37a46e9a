import { href, redirect } from "react-router";
import { CheckForm } from "~/components/shop/check-form";
import { Window } from "~/components/ui/window";
import { normaliseCheckCode } from "~/domain/orders/check-code.server";
import { useMessages } from "~/languages/messages";
import type { Route } from "./+types/check";

export const handle = { still: true };

/** A code typed here leads to its own address; one that cannot be a code comes back as it was typed. */
export function loader({ url, params }: Route.LoaderArgs) {
  const typed = url.searchParams.get("code");
  if (typed === null || typed.trim() === "") return { typed: null };
  const code = normaliseCheckCode(typed);
  if (code !== null) throw redirect(href("/:lang?/check/:code", { lang: params.lang, code }));
  return { typed: typed.slice(0, 40) };
}

export default function Check({ loaderData: { typed } }: Route.ComponentProps) {
  const { shop, checkout } = useMessages();
  return (
    <Window>
      <div className="flow">
        <title>{shop.checkTitle}</title>
        <h1>{shop.checkTitle}</h1>
        <p className="lead">{shop.checkIntro}</p>
        <CheckForm typed={typed ?? ""} {...(typed === null ? {} : { error: checkout.check.wrong })} />
        <p className="note">{shop.checkCaution}</p>
      </div>
    </Window>
  );
}
