import { href, Link } from "react-router";
import { FilterBar } from "~/components/form/filter-bar";
import { Select } from "~/components/form/select";
import { foreEdge, leftWords, paperWords, price } from "~/components/shop/edition-view";
import { PrintList } from "~/components/shop/print-list";
import { EmptyState } from "~/components/ui/empty-state";
import { Window } from "~/components/ui/window";
import { publishedPrints } from "~/domain/prints/catalogue.server";
import { findPrints, printsWanted } from "~/domain/prints/find-prints";
import { theStudio } from "~/domain/studio/studio.server";
import { segmentOf } from "~/languages/language";
import { count, fill, useLanguage, useMessages } from "~/languages/messages";
import type { Route } from "./+types/prints";

export async function loader({ request }: Route.LoaderArgs) {
  const { currency, zone, name } = await theStudio();
  const all = await publishedPrints();
  const wanted = printsWanted(new URL(request.url).searchParams);
  const papers = new Map(
    all.flatMap((p) => p.editions.flatMap((e) => e.formats.map((f) => [f.paper.id, f.paper.name] as const))),
  );
  const series = new Map(
    all.flatMap((p) => (p.series === null ? [] : [[p.series.slug, p.series.title] as const])),
  );
  return {
    name,
    currency,
    zone,
    wanted,
    prints: findPrints(all, wanted),
    papers: [...papers].map(([value, label]) => ({ value, label })),
    series: [...series].map(([value, label]) => ({ value, label })),
  };
}

export function headers() {
  return { "Cache-Control": "private, no-cache" };
}

export default function Prints({ loaderData }: Route.ComponentProps) {
  const { shop } = useMessages();
  const language = useLanguage();
  const lang = segmentOf(language);
  const { prints, wanted, currency, zone } = loaderData;
  const shown = { language, currency, zone };
  return (
    <>
      <title>{`${shop.printsTitle}, ${loaderData.name}`}</title>
      <Window labelledBy="prints">
        <div className="section-head">
          <h1 id="prints">{shop.printsTitle}</h1>
          <p className="quiet">{shop.printsIntro}</p>
        </div>
        <FilterBar
          label={shop.filterLabel}
          submit={shop.show}
          clear={<Link to={href("/:lang?/prints", { lang })}>{shop.showAll}</Link>}
        >
          <Select
            label={shop.filterSeries}
            name="series"
            defaultValue={wanted.series}
            options={[{ value: "", label: shop.anySeries }, ...loaderData.series]}
          />
          <Select
            label={shop.filterPaper}
            name="paper"
            defaultValue={wanted.paper}
            options={[{ value: "", label: shop.anyPaper }, ...loaderData.papers]}
          />
          <Select
            label={shop.filterLeft}
            name="left"
            defaultValue={wanted.left}
            options={[
              { value: "", label: shop.anyLeft },
              { value: "now", label: shop.onlyLeft },
              { value: "before", label: shop.onlyComing },
            ]}
          />
          <Select
            label={shop.filterSort}
            name="sort"
            defaultValue={wanted.sort}
            options={[
              { value: "", label: shop.sortStudio },
              { value: "price", label: shop.sortPrice },
              { value: "year", label: shop.sortYear },
              { value: "left", label: shop.sortLeft },
            ]}
          />
        </FilterBar>
        <p className="note" role="status">
          {count(language, shop.found, prints.length)}
        </p>
        {prints.length === 0 ? (
          <EmptyState action={<Link to={href("/:lang?/prints", { lang })}>{shop.showAll}</Link>}>
            {shop.noMatch}
          </EmptyState>
        ) : (
          <PrintList
            prints={prints.map((print) => {
              const edition = print.editions.find((e) => e.sale === "now" && e.free > 0) ?? print.editions[0];
              const papers = [...new Set(print.editions.flatMap((e) => e.formats.map(paperWords)))];
              const amounts = print.editions.flatMap((e) =>
                e.formats.flatMap((f) => (e.sale === "over" ? [] : (f.nextAmount ?? []))),
              );
              const lowest = amounts.length === 0 ? "" : price(Math.min(...amounts), shown);
              return {
                key: print.id,
                to: href("/:lang?/prints/:slug", { lang, slug: print.slug }),
                picture: print.pictures[0] ?? { proofs: [] },
                title: print.title,
                words: [print.series?.title, ...papers].filter(Boolean).join("; "),
                ...(edition === undefined ? {} : { foreEdge: foreEdge(edition, shown) }),
                left: edition === undefined ? "" : leftWords(edition, shown),
                price: new Set(amounts).size > 1 ? fill(shop.from, { price: lowest }) : lowest,
              };
            })}
          />
        )}
      </Window>
    </>
  );
}
