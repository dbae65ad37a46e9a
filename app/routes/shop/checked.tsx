import { data } from "react-router";
import { CheckForm } from "~/components/shop/check-form";
import { CheckedCopySheet } from "~/components/shop/checked-copy";
import { Window } from "~/components/ui/window";
import { requestInfoContext } from "~/context";
import { checkCopy } from "~/domain/orders/check-copy.server";
import { useMessages } from "~/languages/messages";
import { limitRequests } from "~/middleware/rate-limit.server";
import type { Route } from "./+types/checked";

export const handle = { still: true };

const NOT_INDEXED = { "X-Robots-Tag": "noindex", "Cache-Control": "private, no-store" };

export async function loader({ params, context }: Route.LoaderArgs) {
  await limitRequests("check", [context.get(requestInfoContext).clientIp]);
  const copy = await checkCopy(params.code);
  return data({ copy, code: params.code.slice(0, 40) }, { status: copy === null ? 404 : 200 });
}

export function headers() {
  return NOT_INDEXED;
}

export default function Checked({ loaderData: { copy, code } }: Route.ComponentProps) {
  const { shop, checkout } = useMessages();
  if (copy !== null) return <CheckedCopySheet copy={copy} />;
  return (
    <Window>
      <div className="flow">
        <title>{shop.checkTitle}</title>
        <h1>{shop.checkTitle}</h1>
        <p className="lead">{shop.checkNotFound}</p>
        <CheckForm typed={code} error={checkout.check.notFound} />
      </div>
    </Window>
  );
}
