import { Form, href, Link, redirect } from "react-router";
import { FormErrorSummary } from "~/components/form/form-error-summary";
import { formState } from "~/components/form/form-state";
import { BenchHead, Block } from "~/components/studio/bench";
import { MoveButtons } from "~/components/studio/move-buttons";
import { measuredWords, PaperFields } from "~/components/studio/paper-fields";
import { EmptyState } from "~/components/ui/empty-state";
import { Press } from "~/components/ui/press";
import { Table } from "~/components/ui/table";
import { signedInContext } from "~/context";
import { papersForm } from "~/domain/papers/paper-form";
import { makePaper, movePaper, studioPapers } from "~/domain/papers/papers.server";
import { can } from "~/domain/people/permissions";
import { formProblem, parseForm } from "~/platform/forms.server";
import { newId } from "~/platform/ids.server";
import type { Route } from "./+types/papers";

export async function loader({ context }: Route.LoaderArgs) {
  const { roles } = context.get(signedInContext);
  return { papers: await studioPapers(), mayChange: can(roles, "papers.change"), newPaperId: newId() };
}

export async function action({ request, context }: Route.ActionArgs) {
  const actor = context.get(signedInContext);
  const form = await parseForm(request, papersForm);
  if (!form.ok) return formProblem(form);
  if (form.value.intent === "move") {
    await movePaper(actor, form.value.id, form.value.to);
    throw redirect(href("/studio/papers"));
  }
  const { intent: _, id, ...fields } = form.value;
  await makePaper(actor, id, fields);
  throw redirect(href("/studio/papers/:paperId", { paperId: id }));
}

export default function Papers({ loaderData, actionData }: Route.ComponentProps) {
  const { papers, mayChange, newPaperId } = loaderData;
  const form = formState(actionData?.problem);
  const inUse = papers.filter((paper) => !paper.retired);
  return (
    <>
      <title>Papers</title>
      <BenchHead
        title="Papers"
        says="What the studio prints on. A paper is retired, never deleted: the book names it."
      />
      <FormErrorSummary errors={form.summary} title="The paper was not added" />
      <Table
        caption="Papers"
        rows={papers}
        rowKey={(paper) => paper.id}
        empty={<EmptyState>The papers the studio prints on will be listed here.</EmptyState>}
        columns={[
          {
            key: "name",
            head: "Paper",
            names: true,
            cell: (paper) => (
              <Link to={href("/studio/papers/:paperId", { paperId: paper.id })}>{paper.name}</Link>
            ),
          },
          { key: "weight", head: "Weight", numeric: true, cell: (paper) => `${paper.grammage} g/m²` },
          {
            key: "surface",
            head: "Surface",
            cell: (paper) => [paper.base, paper.surface].filter(Boolean).join(", "),
          },
          { key: "measured", head: "Measured", cell: measuredWords },
          {
            key: "used",
            head: "Editions",
            numeric: true,
            cell: (paper) => paper.openedEditions + paper.drafts,
          },
          { key: "state", head: "State", cell: (paper) => (paper.retired ? "retired" : "in use") },
          {
            key: "move",
            head: "Order",
            headHidden: true,
            cell: (paper) =>
              mayChange && !paper.retired ? (
                <MoveButtons
                  of={paper.name}
                  fields={{ intent: "move", id: paper.id }}
                  first={paper.id === inUse[0]?.id}
                  last={paper.id === inUse.at(-1)?.id}
                />
              ) : null,
          },
        ]}
      />
      {mayChange ? (
        <Block title="Add a paper">
          <Form method="post" className="bench-form">
            <input type="hidden" name="intent" value="make" />
            <input type="hidden" name="id" value={form.value("id") ?? newPaperId} />
            <PaperFields form={form} />
            <div className="acts">
              <Press>Add the paper</Press>
            </div>
          </Form>
        </Block>
      ) : null}
    </>
  );
}
