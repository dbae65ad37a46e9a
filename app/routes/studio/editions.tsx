import { href, Link } from "react-router";
import { Field } from "~/components/form/field";
import { FilterBar } from "~/components/form/filter-bar";
import { Select } from "~/components/form/select";
import { BenchHead } from "~/components/studio/bench";
import { EditionTable } from "~/components/studio/edition-table";
import { PressLink } from "~/components/ui/press";
import { signedInContext } from "~/context";
import { editionsAsked, studioEditions } from "~/domain/editions/edition-page.server";
import { can } from "~/domain/people/permissions";
import { theStudio } from "~/domain/studio/studio.server";
import type { Route } from "./+types/editions";

export async function loader({ request, context }: Route.LoaderArgs) {
  const asked = editionsAsked(new URL(request.url).searchParams);
  const { zone } = await theStudio();
  return {
    asked,
    zone,
    editions: await studioEditions(asked),
    mayOpen: can(context.get(signedInContext).roles, "editions.open"),
  };
}

export default function Editions({ loaderData }: Route.ComponentProps) {
  const { asked, editions, zone, mayOpen } = loaderData;
  return (
    <>
      <title>Editions</title>
      <BenchHead
        title="Editions"
        says="Every numbered run, and what is left of it."
        acts={
          mayOpen ? (
            <PressLink variant="filled" small to={href("/studio/editions/new")}>
              Plan an edition
            </PressLink>
          ) : null
        }
      />
      <FilterBar
        label="Find editions"
        submit="Show"
        clear={<Link to={href("/studio/editions")}>Show all</Link>}
      >
        <Field label="Print, paper or size" name="q" type="search" defaultValue={asked.q} />
        <Select
          label="State"
          name="state"
          defaultValue={asked.state}
          blank="Any"
          options={[
            { value: "draft", label: "Draft" },
            { value: "coming", label: "To be released" },
            { value: "open", label: "Open, some left" },
            { value: "gone", label: "Open, none left" },
            { value: "closed", label: "Closed" },
          ]}
        />
      </FilterBar>
      <p className="note" role="status">
        {editions.length === 1 ? "1 edition" : `${editions.length} editions`}
      </p>
      <EditionTable editions={editions} asked={asked} zone={zone} />
    </>
  );
}
