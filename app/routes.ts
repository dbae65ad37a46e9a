import { index, layout, prefix, type RouteConfig, route } from "@react-router/dev/routes";

/**
 * Every address of the product. `:lang?` is absent for English and `de` for German; the studio is English only.
 * Where a price depends on the buyer's country, that country is in the address too: `?to=DE`.
 */
export default [
  route("healthz", "routes/api/healthz.ts"),
  route("readyz", "routes/api/readyz.ts"),
  route("hooks/stripe", "routes/hooks/stripe.ts"),
  ...prefix("api/v1", [
    route("openapi.json", "routes/api/openapi.ts"),
    route("prints", "routes/api/prints.ts"),
    route("prints/:slug", "routes/api/print.ts"),
    route("editions/:id", "routes/api/edition.ts"),
  ]),
  route("theme", "routes/studio/theme.ts"),
  route("setup", "routes/auth/setup.tsx"),

  layout("routes/studio/layout.tsx", [
    ...prefix("studio", [
      index("routes/studio/today.tsx"),
      route("rolls", "routes/studio/rolls.tsx"),
      route("rolls/new", "routes/studio/roll-new.tsx"),
      route("rolls/:rollId", "routes/studio/roll.tsx"),
      route("rolls/:rollId/uploads", "routes/studio/roll-uploads.ts"),
      route("rolls/:rollId/frames/:frameId", "routes/studio/frame.tsx"),
      route("proofs/:proofId", "routes/studio/proof.ts"),
      route("prints", "routes/studio/prints.tsx"),
      route("prints/new", "routes/studio/print-new.tsx"),
      route("prints/:printId", "routes/studio/print.tsx"),
      route("series", "routes/studio/series.tsx"),
      route("editions", "routes/studio/editions.tsx"),
      route("editions/new", "routes/studio/edition-new.tsx"),
      route("editions/figures", "routes/studio/edition-figures.ts"),
      route("editions/:editionId", "routes/studio/edition.tsx"),
      route("print-room", "routes/studio/print-room.tsx"),
      route("orders", "routes/studio/orders.tsx"),
      route("orders/new", "routes/studio/order-new.tsx"),
      route("orders/:orderId", "routes/studio/order.tsx"),
      route("papers", "routes/studio/papers.tsx"),
      route("papers/:paperId", "routes/studio/paper.tsx"),
      route("people", "routes/studio/people.tsx"),
      route("people/:partyId", "routes/studio/party.tsx"),
      route("settings", "routes/studio/settings.tsx"),
    ]),
  ]),

  route(":lang?", "routes/shop/layout.tsx", [
    index("routes/shop/home.tsx"),
    route("prints", "routes/shop/prints.tsx"),
    route("prints/:slug", "routes/shop/print.tsx"),
    route("series", "routes/shop/all-series.tsx"),
    route("series/:slug", "routes/shop/series.tsx"),
    route("check", "routes/shop/check.tsx"),
    route("check/:code", "routes/shop/checked.tsx"),
    route("basket", "routes/checkout/basket.tsx"),
    route("checkout", "routes/checkout/checkout.tsx"),
    route("orders/:token", "routes/checkout/order.tsx"),
    route("orders/:token/pay", "routes/checkout/pay.tsx"),
    route("sign-in", "routes/auth/sign-in.tsx"),
    route("sign-up", "routes/auth/sign-up.tsx"),
    route("sign-out", "routes/auth/sign-out.tsx"),
    route("forgotten", "routes/auth/forgotten.tsx"),
    route("reset/:token", "routes/auth/reset.tsx"),
    route("verify/:token", "routes/auth/verify.tsx"),
    route("invitation/:token", "routes/auth/invitation.tsx"),
    layout("routes/account/layout.tsx", [
      route("account", "routes/account/account.tsx"),
      route("account/orders", "routes/account/orders.tsx"),
    ]),
    route("*", "routes/shop/not-found.tsx"),
  ]),
] satisfies RouteConfig;
