import { href, Link, redirect } from "react-router";
import { Field } from "~/components/form/field";
import { FilterBar } from "~/components/form/filter-bar";
import { Select } from "~/components/form/select";
import { BenchHead } from "~/components/studio/bench";
import { PrintTable } from "~/components/studio/print-table";
import { PressLink } from "~/components/ui/press";
import { signedInContext } from "~/context";
import { can } from "~/domain/people/permissions";
import { movePrint } from "~/domain/prints/order-prints.server";
import { moveForm } from "~/domain/prints/print-form";
import { PRINT_STATE_WORDS } from "~/domain/prints/publishing";
import { printsAsked, studioPrints, studioSeries } from "~/domain/prints/studio-prints.server";
import { AppError } from "~/platform/errors";
import { parseForm } from "~/platform/forms.server";
import type { Route } from "./+types/prints";

export async function loader({ request, context }: Route.LoaderArgs) {
  const asked = printsAsked(new URL(request.url).searchParams);
  const [prints, series] = [await studioPrints(asked), await studioSeries()];
  return {
    asked,
    prints,
    series: series.map(({ id, title }) => ({ id, title })),
    mayChange: can(context.get(signedInContext).roles, "prints.change"),
  };
}

export async function action({ request, context }: Route.ActionArgs) {
  const form = await parseForm(request, moveForm);
  if (!form.ok) throw new AppError("bad_request");
  await movePrint(context.get(signedInContext), form.value.id, form.value.to);
  throw redirect(href("/studio/prints"));
}

export default function Prints({ loaderData }: Route.ComponentProps) {
  const { asked, prints, series, mayChange } = loaderData;
  return (
    <>
      <title>Prints</title>
      <BenchHead
        title="Prints"
        says="Finished works, in the order the shop shows them."
        acts={
          <>
            {mayChange ? (
              <PressLink variant="filled" small to={href("/studio/prints/new")}>
                Make a print
              </PressLink>
            ) : null}
            <Link to={href("/studio/series")}>Series</Link>
          </>
        }
      />
      <FilterBar label="Find prints" submit="Show" clear={<Link to={href("/studio/prints")}>Show all</Link>}>
        <Field label="Title, year or address" name="q" defaultValue={asked.q} type="search" />
        <Select
          label="State"
          name="state"
          defaultValue={asked.state}
          blank="Any"
          options={Object.entries(PRINT_STATE_WORDS).map(([value, label]) => ({ value, label }))}
        />
        <Select
          label="Series"
          name="series"
          defaultValue={asked.series}
          blank="Any"
          options={[
            ...series.map((one) => ({ value: one.id, label: one.title })),
            { value: "none", label: "In no series" },
          ]}
        />
      </FilterBar>
      <p className="note" role="status">
        {prints.length === 1 ? "1 print" : `${prints.length} prints`}
      </p>
      <PrintTable prints={prints} asked={asked} mayMove={mayChange} />
    </>
  );
}
