import { href, Link } from "react-router";
import { DryingLine } from "~/components/shop/drying-line";
import {
  foreEdge,
  leftWords,
  nextMark,
  outsideWords,
  paperWords,
  price,
  sizeWords,
} from "~/components/shop/edition-view";
import { PrintList } from "~/components/shop/print-list";
import { ReleaseLabel } from "~/components/shop/release-label";
import { EmptyState } from "~/components/ui/empty-state";
import { MountedPrint } from "~/components/ui/mounted-print";
import { PressLink } from "~/components/ui/press";
import { Part, Window } from "~/components/ui/window";
import { formatInstant } from "~/domain/dates";
import {
  publishedPrints,
  publishedSeries,
  type ShownEdition,
  type ShownPrint,
} from "~/domain/prints/catalogue.server";
import { theStudio } from "~/domain/studio/studio.server";
import { LANGUAGE_TAG, segmentOf } from "~/languages/language";
import { count, fill, useLanguage, useMessages } from "~/languages/messages";
import type { Route } from "./+types/home";

export async function loader() {
  const studio = await theStudio();
  const [prints, series] = await Promise.all([publishedPrints(), publishedSeries()]);
  const { name, statement, signature, currency, zone } = studio;
  return { name, statement, signature, currency, zone, prints, series };
}

export function headers() {
  return { "Cache-Control": "private, no-cache" };
}

type Released = { print: ShownPrint; edition: ShownEdition };

export default function Home({ loaderData }: Route.ComponentProps) {
  const { shop } = useMessages();
  const language = useLanguage();
  const lang = segmentOf(language);
  const { prints, series, signature, zone } = loaderData;
  const shown = { language, zone, currency: loaderData.currency };
  const all: Released[] = prints.flatMap((print) => print.editions.map((edition) => ({ print, edition })));
  const [coming] = all
    .filter((r) => r.edition.sale === "before")
    .sort((a, b) => a.edition.releaseAt.getTime() - b.edition.releaseAt.getTime());
  const now = all.filter((r) => r.edition.sale === "now" && r.edition.free > 0);
  const pictured = now.filter((r) => (r.print.pictures[0]?.proofs.length ?? 0) > 0);
  const leading = pictured[0] ?? (all[0] === undefined ? undefined : all[0]);
  const pair = pictured
    .filter((r) => r.print.id !== leading?.print.id)
    .filter(firstOfPrint)
    .slice(0, 2);
  const to = (print: ShownPrint) => href("/:lang?/prints/:slug", { lang, slug: print.slug });
  const hung = ({ print, edition }: Released, first: boolean) => (
    <MountedPrint
      key={edition.id}
      to={to(print)}
      picture={{
        proofs: print.pictures[0]?.proofs ?? [],
        alt: print.pictures[0]?.description ?? "",
        sizes: "(min-width: 62rem) 36rem, 92vw",
        ...(first ? { fetchPriority: "high" as const } : { loading: "lazy" as const }),
      }}
      marginLine={{
        number: nextMark(edition),
        title: print.title,
        signature: `${signature} ${print.year ?? ""}`.trim(),
      }}
    />
  );
  return (
    <>
      <title>{loaderData.name}</title>
      <meta name="description" content={loaderData.statement} />
      <section className={coming ? "release-top" : "release-top release-alone"} aria-label={loaderData.name}>
        {leading ? hung(leading, true) : <EmptyState>{shop.nothingYet}</EmptyState>}
        <div>
          {coming ? (
            <p className="lead home-lead">{loaderData.statement}</p>
          ) : (
            <h1 className="lead home-lead">
              {loaderData.statement === "" ? loaderData.name : loaderData.statement}
            </h1>
          )}
          {coming ? <Coming released={coming} shown={shown} to={to(coming.print)} /> : null}
        </div>
      </section>
      {series.map((one) => {
        const own = prints.filter((p) => p.series?.slug === one.slug);
        return (
          <Window key={one.slug} labelledBy={`series-${one.slug}`}>
            <div className="section-head">
              <h2 id={`series-${one.slug}`}>{one.title}</h2>
              <p className="quiet">
                {one.statement}{" "}
                <Link to={href("/:lang?/series/:slug", { lang, slug: one.slug })}>{shop.allOfSeries}</Link>
              </p>
            </div>
            <DryingLine
              prints={own.slice(0, 5).map((print) => ({
                key: print.id,
                to: to(print),
                picture: print.pictures[0] ?? { proofs: [] },
                title: print.title,
                words: print.editions[0] === undefined ? "" : leftWords(print.editions[0], shown),
              }))}
            />
          </Window>
        );
      })}
      {pair.length === 2 ? <div className="pair">{pair.map((r) => hung(r, false))}</div> : null}
      <Window labelledBy="in-hand">
        <Part headingId="in-hand" title={shop.inHandNow} intro={shop.inHandText} note={shop.inHandNote}>
          {now.length === 0 ? (
            <EmptyState>{shop.nothingInHand}</EmptyState>
          ) : (
            <PrintList
              prints={now.slice(0, 8).map(({ print, edition }) => {
                const [format] = edition.formats;
                const mark = nextMark(edition);
                return {
                  key: edition.id,
                  to: to(print),
                  picture: print.pictures[0] ?? { proofs: [] },
                  title: print.title,
                  words: format === undefined ? "" : `${paperWords(format)}, ${sizeWords(format, language)}`,
                  foreEdge: foreEdge(edition, shown),
                  left:
                    mark === null
                      ? leftWords(edition, shown)
                      : `${leftWords(edition, shown)}, ${fill(shop.nextIs, { mark })}`,
                  price: cheapest(edition, shown),
                };
              })}
            />
          )}
        </Part>
      </Window>
    </>
  );
}

function firstOfPrint(released: Released, index: number, list: Released[]): boolean {
  return list.findIndex((r) => r.print.id === released.print.id) === index;
}

function cheapest(
  edition: ShownEdition,
  shown: { language: "en" | "de"; currency: string; zone: string },
): string {
  const amounts = edition.formats.flatMap((f) => f.nextAmount ?? []);
  return amounts.length === 0 ? "" : price(Math.min(...amounts), shown);
}

function Coming({
  released,
  shown,
  to,
}: {
  released: Released;
  shown: Parameters<typeof price>[1] & { zone: string };
  to: string;
}) {
  const { shop } = useMessages();
  const { print, edition } = released;
  const { language } = shown;
  const [format] = edition.formats;
  const seen = (print.pictures[0]?.proofs.length ?? 0) > 0;
  return (
    <ReleaseLabel
      kind={shop.release}
      title={print.title}
      titleId="release"
      facts={[
        {
          term: shop.opens,
          detail: (
            <time dateTime={edition.releaseAt.toISOString()}>
              {formatInstant(edition.releaseAt, shown.zone, LANGUAGE_TAG[language])}
            </time>
          ),
        },
        {
          term: shop.sheets,
          detail: `${count(language, shop.numbered, edition.limit)}; ${outsideWords(edition, language)}`,
        },
        ...(format === undefined
          ? []
          : [
              { term: shop.paper, detail: paperWords(format) },
              { term: shop.imageAndSheet, detail: sizeWords(format, language) },
              ...format.steps.map((step) => ({
                term: fill(step.fromNumber === step.toNumber ? shop.numberOnly : shop.numbersFromTo, {
                  from: step.fromNumber,
                  to: step.toNumber,
                }),
                detail: price(step.amount, shown),
              })),
            ]),
      ]}
    >
      <p className="note">{seen ? null : shop.shownAtRelease}</p>
      <PressLink to={to}>{shop.seeThePrint}</PressLink>
    </ReleaseLabel>
  );
}
