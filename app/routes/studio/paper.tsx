import { Form, href, Link, redirect } from "react-router";
import { FormErrorSummary } from "~/components/form/form-error-summary";
import { formState } from "~/components/form/form-state";
import { BenchHead, Block } from "~/components/studio/bench";
import { measuredWords, PaperFields, paperAnswers } from "~/components/studio/paper-fields";
import { EmptyState } from "~/components/ui/empty-state";
import { Facts } from "~/components/ui/facts";
import { Press } from "~/components/ui/press";
import { signedInContext } from "~/context";
import { paperForm } from "~/domain/papers/paper-form";
import { editPaper, retirePaper, studioPaper } from "~/domain/papers/papers.server";
import { can } from "~/domain/people/permissions";
import { AppError } from "~/platform/errors";
import { formProblem, parseForm } from "~/platform/forms.server";
import { idFrom } from "~/platform/uuid";
import type { Route } from "./+types/paper";

const PROMISED = "An opened edition names this paper: its name and weight stay. Add another paper instead.";

export async function loader({ params, context }: Route.LoaderArgs) {
  const paper = await studioPaper(idFrom(params.paperId));
  if (paper === null) throw new AppError("not_found");
  return { paper, mayChange: can(context.get(signedInContext).roles, "papers.change") };
}

export async function action({ request, params, context }: Route.ActionArgs) {
  const actor = context.get(signedInContext);
  const paperId = idFrom(params.paperId);
  const form = await parseForm(request, paperForm);
  if (!form.ok) return formProblem(form);
  const here = href("/studio/papers/:paperId", { paperId });
  if (form.value.intent !== "edit") {
    await retirePaper(actor, paperId, form.value.intent === "retire");
    throw redirect(here);
  }
  const { intent: _, ...fields } = form.value;
  const outcome = await editPaper(actor, paperId, fields);
  if (outcome.kind === "promised") return formProblem(form, { name: [PROMISED] });
  throw redirect(here);
}

export default function Paper({ loaderData, actionData }: Route.ComponentProps) {
  const { paper, mayChange } = loaderData;
  const form = formState(actionData?.problem, paperAnswers(paper));
  const opened = paper.editions.some((edition) => edition.state !== "draft");
  return (
    <>
      <title>{paper.name}</title>
      <BenchHead
        title={paper.name}
        says={`${paper.grammage} g/m²${paper.retired ? ", retired: no new edition takes it" : ""}`}
        acts={
          mayChange ? (
            <Form method="post">
              <Press variant="outlined" small name="intent" value={paper.retired ? "bring-back" : "retire"}>
                {paper.retired ? "Bring it back into use" : "Retire this paper"}
              </Press>
            </Form>
          ) : null
        }
      />
      <FormErrorSummary errors={form.summary} title="The paper was not changed" />
      {mayChange ? (
        <Form method="post" className="bench-form">
          <input type="hidden" name="intent" value="edit" />
          <PaperFields form={form} fixed={opened} />
          <div className="acts">
            <Press>Keep these words</Press>
          </div>
        </Form>
      ) : (
        <Facts
          items={[
            { term: "Base", detail: paper.base || "not given" },
            { term: "Surface", detail: paper.surface || "not given" },
            { term: "Measured", detail: measuredWords(paper) },
            { term: "Description", detail: paper.description || "none" },
          ]}
        />
      )}
      <Block title="Editions on it">
        {paper.editions.length === 0 ? (
          <EmptyState>No edition is on this paper yet.</EmptyState>
        ) : (
          <ul className="plain-list">
            {paper.editions.map((edition) => (
              <li key={edition.id}>
                <Link to={href("/studio/editions/:editionId", { editionId: edition.id })}>
                  {edition.title}, edition of {edition.limit}
                </Link>{" "}
                <span className="quiet">{edition.state}</span>
              </li>
            ))}
          </ul>
        )}
      </Block>
    </>
  );
}
