import { href, Link } from "react-router";
import { DryingLine } from "~/components/shop/drying-line";
import { leftWords } from "~/components/shop/edition-view";
import { EmptyState } from "~/components/ui/empty-state";
import { Window } from "~/components/ui/window";
import { publishedPrints, publishedSeries } from "~/domain/prints/catalogue.server";
import { theStudio } from "~/domain/studio/studio.server";
import { segmentOf } from "~/languages/language";
import { useLanguage, useMessages } from "~/languages/messages";
import type { Route } from "./+types/all-series";

export const handle = { still: true };

export async function loader() {
  const { zone, name } = await theStudio();
  const [prints, series] = await Promise.all([publishedPrints(), publishedSeries()]);
  return { name, zone, prints, series };
}

export function headers() {
  return { "Cache-Control": "private, no-cache" };
}

export default function AllSeries({ loaderData }: Route.ComponentProps) {
  const { shop } = useMessages();
  const language = useLanguage();
  const lang = segmentOf(language);
  return (
    <>
      <title>{`${shop.seriesTitle}, ${loaderData.name}`}</title>
      <div className="section-head">
        <h1>{shop.seriesTitle}</h1>
        <p className="quiet">{shop.seriesIntro}</p>
      </div>
      {loaderData.series.length === 0 ? <EmptyState>{shop.nothingYet}</EmptyState> : null}
      {loaderData.series.map((one) => (
        <Window key={one.slug} labelledBy={`series-${one.slug}`}>
          <div className="section-head">
            <h2 id={`series-${one.slug}`}>
              <Link to={href("/:lang?/series/:slug", { lang, slug: one.slug })}>{one.title}</Link>
            </h2>
            <p className="quiet">{one.statement}</p>
          </div>
          <DryingLine
            prints={loaderData.prints
              .filter((p) => p.series?.slug === one.slug)
              .map((print) => ({
                key: print.id,
                to: href("/:lang?/prints/:slug", { lang, slug: print.slug }),
                picture: print.pictures[0] ?? { proofs: [] },
                title: print.title,
                words:
                  print.editions[0] === undefined
                    ? ""
                    : leftWords(print.editions[0], { language, zone: loaderData.zone }),
              }))}
          />
        </Window>
      ))}
    </>
  );
}
