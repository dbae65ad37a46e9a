import { data, href, Outlet, redirect, useLocation } from "react-router";
import { ShopLayout } from "~/components/layout/shop-layout";
import { ShopFooter } from "~/components/shop/shop-footer";
import { visitorContext } from "~/context";
import { can } from "~/domain/people/permissions";
import { setupIsOpen } from "~/domain/studio/setup.server";
import { studioOrNull } from "~/domain/studio/studio.server";
import { LANGUAGES, languageOfSegment, segmentOf } from "~/languages/language";
import { fill, useLanguage, useMessages } from "~/languages/messages";
import { readBasket } from "~/middleware/basket.server";
import { AppError } from "~/platform/errors";
import type { Route } from "./+types/layout";

export async function loader({ request, context, params }: Route.LoaderArgs) {
  if (languageOfSegment(params.lang) === null) throw new AppError("not_found");
  const studio = await studioOrNull();
  if (studio === null) {
    if (await setupIsOpen()) throw redirect(href("/setup"));
    throw new AppError("unavailable");
  }
  const visitor = context.get(visitorContext);
  return data({
    studioName: studio.name,
    photographer: studio.photographer,
    address: studio.address,
    email: studio.email,
    basketCount: (await readBasket(request)).length,
    signedIn: visitor !== null,
    worksHere: visitor !== null && can(visitor.roles, "studio.see"),
  });
}

export default function Shop({ loaderData }: Route.ComponentProps) {
  const { shop } = useMessages();
  const language = useLanguage();
  const lang = segmentOf(language);
  const { pathname, search } = useLocation();
  const plain = language === "en" ? pathname : pathname.replace(/^\/de(?=\/|$)/, "") || "/";
  // "Sunniva Harcastle Photographs": the photographer's name stands upright, what follows it is set lighter.
  const name = loaderData.studioName.startsWith(loaderData.photographer)
    ? {
        name: loaderData.photographer,
        kind: loaderData.studioName.slice(loaderData.photographer.length).trim(),
      }
    : { name: loaderData.studioName };
  return (
    <ShopLayout
      studioName={name}
      home={href("/:lang?", { lang })}
      nav={[
        { label: shop.prints, to: href("/:lang?/prints", { lang }) },
        { label: shop.series, to: href("/:lang?/series", { lang }) },
        { label: shop.check, more: shop.checkMore, to: href("/:lang?/check", { lang }) },
        ...(loaderData.worksHere ? [{ label: shop.studioLink, to: href("/studio") }] : []),
        loaderData.signedIn
          ? { label: shop.account, to: href("/:lang?/account", { lang }) }
          : { label: shop.signIn, to: href("/:lang?/sign-in", { lang }) },
      ]}
      navLabel={shop.nav}
      basket={{ label: shop.basket, to: href("/:lang?/basket", { lang }) }}
      basketCount={loaderData.basketCount}
      languagesLabel={shop.languages}
      languageLinks={LANGUAGES.filter((l) => l !== language).map((l) => ({
        lang: l,
        label: { en: "English", de: "Deutsch" }[l],
        to: (l === "en" ? plain : `/de${plain === "/" ? "" : plain}`) + search,
      }))}
      footer={ShopFooter({ words: shop, lang, address: loaderData.address, email: loaderData.email })}
      footerNote={fill(shop.footNote, { photographer: loaderData.photographer })}
      footerLinks={[]}
      skipLabel={shop.skip}
    >
      <Outlet />
    </ShopLayout>
  );
}
