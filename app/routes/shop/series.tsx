import { href } from "react-router";
import { leftWords, nextMark } from "~/components/shop/edition-view";
import { MountedPrint } from "~/components/ui/mounted-print";
import { publishedPrints, publishedSeries } from "~/domain/prints/catalogue.server";
import { theStudio } from "~/domain/studio/studio.server";
import { segmentOf } from "~/languages/language";
import { useLanguage } from "~/languages/messages";
import { AppError } from "~/platform/errors";
import type { Route } from "./+types/series";

export const handle = { still: true };

export async function loader({ params }: Route.LoaderArgs) {
  const { zone, name, signature } = await theStudio();
  const series = (await publishedSeries()).find((s) => s.slug === params.slug);
  if (series === undefined) throw new AppError("not_found");
  const prints = (await publishedPrints()).filter((p) => p.series?.slug === series.slug);
  return { name, zone, signature, series, prints };
}

export function headers() {
  return { "Cache-Control": "private, no-cache" };
}

export default function Series({ loaderData }: Route.ComponentProps) {
  const language = useLanguage();
  const lang = segmentOf(language);
  const { series, prints, zone, signature } = loaderData;
  return (
    <>
      <title>{`${series.title}, ${loaderData.name}`}</title>
      <div className="section-head">
        <h1>{series.title}</h1>
        <p className="lead">{series.statement}</p>
      </div>
      <div className="pair">
        {prints.map((print, index) => {
          const edition = print.editions.find((e) => e.sale === "now") ?? print.editions[0];
          return (
            <MountedPrint
              key={print.id}
              to={href("/:lang?/prints/:slug", { lang, slug: print.slug })}
              picture={{
                proofs: print.pictures[0]?.proofs ?? [],
                alt: print.pictures[0]?.description ?? "",
                sizes: "(min-width: 62rem) 40rem, 92vw",
                loading: index < 2 ? "eager" : "lazy",
              }}
              marginLine={{
                number: edition === undefined ? null : nextMark(edition),
                title: print.title,
                signature: `${signature} ${print.year ?? ""}`.trim(),
              }}
            >
              {edition === undefined ? null : (
                <figcaption className="note">{leftWords(edition, { language, zone })}</figcaption>
              )}
            </MountedPrint>
          );
        })}
      </div>
    </>
  );
}
