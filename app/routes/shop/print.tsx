import { href, Link, redirect } from "react-router";
import { EditionSheet } from "~/components/shop/edition-sheet";
import { nextMark, paperWords } from "~/components/shop/edition-view";
import { ChooseEdition, DeliveryPart, EditionFacts, OtherEditions } from "~/components/shop/print-parts";
import { Wall } from "~/components/shop/wall";
import { MountedPrint } from "~/components/ui/mounted-print";
import { Part, Window } from "~/components/ui/window";
import { languageContext } from "~/context";
import { copiesOf } from "~/domain/editions/cap";
import { previewDelivery } from "~/domain/orders/delivery-preview.server";
import { countriesByName, countryName, isCountryCode } from "~/domain/people/countries";
import { otherPrintsOf, publishedPrint, type ShownPrint } from "~/domain/prints/catalogue.server";
import { theStudio } from "~/domain/studio/studio.server";
import { LANGUAGE_TAG, segmentOf } from "~/languages/language";
import { fill, messagesOf, useLanguage, useMessages } from "~/languages/messages";
import { basketHeader, readBasket } from "~/middleware/basket.server";
import { now } from "~/platform/clock";
import { AppError } from "~/platform/errors";
import { formProblem, readForm } from "~/platform/forms.server";
import type { Route } from "./+types/print";

export async function loader({ request, params, context }: Route.LoaderArgs) {
  const language = context.get(languageContext);
  const [studio, print] = await Promise.all([theStudio(), publishedPrint(params.slug)]);
  if (print === null) throw new AppError("not_found");
  const asked = new URL(request.url).searchParams.get("to")?.toUpperCase() ?? "";
  const country = isCountryCode(asked) ? asked : studio.country;
  const edition = print.editions.find((e) => e.sale === "now" && e.free > 0);
  const format = edition?.formats[0];
  const [others, preview] = await Promise.all([
    otherPrintsOf(print),
    format === undefined ? null : previewDelivery(format.id, country),
  ]);
  const mark = edition === undefined ? null : nextMark(edition);
  return {
    studioName: studio.name,
    signature: studio.signature,
    holdMinutes: studio.holdMinutes,
    currency: studio.currency,
    zone: studio.zone,
    seenAt: now(),
    print,
    others,
    countries: countriesByName(LANGUAGE_TAG[language]),
    to: {
      country,
      countryName: countryName(country, LANGUAGE_TAG[language]),
      delivery: preview?.delivery ?? null,
      home: { country: studio.country, name: countryName(studio.country, LANGUAGE_TAG[language]) },
      exportPrice:
        preview?.amountThere == null || mark === null ? null : { mark, amount: preview.amountThere },
    },
  };
}

/** Puts the chosen format's next number in the basket; nothing is held yet. */
export async function action({ request, params, context }: Route.ActionArgs) {
  const { shop } = messagesOf(context.get(languageContext));
  const print = await publishedPrint(params.slug);
  if (print === null) throw new AppError("not_found");
  const chosen = (await readForm(request)).get("format");
  const format = print.editions.flatMap((e) => e.formats).find((f) => f.id === chosen);
  if (format === undefined) return formProblem({ answers: {} }, { format: [shop.chooseEdition] });
  const basket = await readBasket(request);
  throw redirect(href("/:lang?/basket", { lang: params.lang }), {
    headers: {
      "Set-Cookie": await basketHeader(basket.includes(format.id) ? basket : [...basket, format.id]),
    },
  });
}

export function headers() {
  return { "Cache-Control": "private, no-cache" };
}

export default function Print({ loaderData, actionData }: Route.ComponentProps) {
  const { shop } = useMessages();
  const language = useLanguage();
  const lang = segmentOf(language);
  const { print, signature, currency, zone } = loaderData;
  const shown = { language, currency, zone };
  const leading = print.editions.find((e) => e.sale === "now" && e.free > 0) ?? print.editions[0];
  const error = actionData?.problem.errors.format?.[0];
  return (
    <>
      <title>{`${print.title}, ${loaderData.studioName}`}</title>
      <meta name="description" content={print.statement} />
      <div className="counter">
        <div className="pictures">
          {print.pictures.map((picture, index) => (
            <MountedPrint
              key={picture.description}
              picture={{
                proofs: picture.proofs,
                alt: picture.description,
                sizes: "(min-width: 62rem) 52rem, 92vw",
                ...(index === 0 ? { fetchPriority: "high" as const } : { loading: "lazy" as const }),
                ...(picture.proofs.length === 0 && leading?.sale === "before"
                  ? { waiting: shop.shownAtRelease }
                  : {}),
              }}
              marginLine={{
                number: leading === undefined ? null : nextMark(leading),
                title: print.title,
                signature: `${signature} ${print.year ?? ""}`.trim(),
              }}
            />
          ))}
        </div>
        <Window as="aside" pad="slip">
          <h1>{print.title}</h1>
          <p className="quiet">
            {print.year === null ? null : `${fill(shop.exposedIn, { year: print.year })} `}
            {print.series === null ? null : (
              <>
                {shop.fromSeries}{" "}
                <Link to={href("/:lang?/series/:slug", { lang, slug: print.series.slug })}>
                  {print.series.title}
                </Link>
                .
              </>
            )}
          </p>
          <ChooseEdition
            print={print}
            shown={shown}
            holdMinutes={loaderData.holdMinutes}
            {...(error === undefined ? {} : { error })}
          />
        </Window>
      </div>
      {print.statement === "" ? null : (
        <Window>
          <p className="lead statement">{print.statement}</p>
        </Window>
      )}
      {print.editions.map((edition) => (
        <EditionSheet key={edition.id} edition={edition} shown={shown} seenAt={loaderData.seenAt} />
      ))}
      <PrintWall print={print} language={language} />
      <Window labelledBy="facts">
        <Part headingId="facts" title={shop.facts}>
          <EditionFacts print={print} shown={shown} total={allCopies([print, ...loaderData.others])} />
        </Part>
      </Window>
      <Window labelledBy="others">
        <Part headingId="others" title={shop.otherEditions}>
          <OtherEditions prints={loaderData.others} shown={shown} />
        </Part>
      </Window>
      <Window labelledBy="delivery">
        <Part headingId="delivery" title={shop.deliveryTitle}>
          <DeliveryPart shown={shown} to={loaderData.to} countries={loaderData.countries} />
        </Part>
      </Window>
    </>
  );
}

function allCopies(prints: ShownPrint[]): number {
  return prints
    .flatMap((p) => p.editions)
    .reduce((sum, e) => sum + copiesOf({ limit: e.limit, ...e.proofsOutside }), 0);
}

function PrintWall({ print, language }: { print: ShownPrint; language: "en" | "de" }) {
  const { shop } = useMessages();
  const [picture] = print.pictures;
  const image = picture?.proofs.filter((p) => p.format === "webp").find((p) => p.width >= 600)?.url;
  if (image === undefined) return null;
  const pieces = print.editions.flatMap((edition) =>
    edition.formats.map((format) => ({
      key: format.id,
      image,
      ...(nextMark(edition) === null ? {} : { number: nextMark(edition) ?? "" }),
      name: paperWords(format),
      size: `${format.sheet.width} × ${format.sheet.height} mm`,
      sheet: format.sheet,
      picture: format.image,
    })),
  );
  return (
    <Wall
      title={shop.onTheWall}
      text={shop.onTheWallText}
      label={fill(shop.onTheWallLabel, { list: pieces.map((p) => p.size).join(", ") })}
      pieces={pieces}
      language={LANGUAGE_TAG[language]}
    />
  );
}
