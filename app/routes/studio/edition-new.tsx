import { data, href, Link, redirect } from "react-router";
import { FormErrorSummary } from "~/components/form/form-error-summary";
import { formState } from "~/components/form/form-state";
import { BenchHead } from "~/components/studio/bench";
import { EditionForm } from "~/components/studio/edition-form";
import { EditionPrints } from "~/components/studio/edition-prints";
import { signedInContext } from "~/context";
import { saveDraft } from "~/domain/editions/draft-edition.server";
import { editionForm, FIRST_ANSWERS } from "~/domain/editions/edition-form";
import { draftPlan, workOut } from "~/domain/editions/plan-action.server";
import { planning } from "~/domain/editions/plan-edition.server";
import { printsAsked, studioPrints } from "~/domain/prints/studio-prints.server";
import { theStudio } from "~/domain/studio/studio.server";
import { AppError } from "~/platform/errors";
import { parseForm, readForm } from "~/platform/forms.server";
import { newId } from "~/platform/ids.server";
import { currencyCode } from "~/platform/money";
import { idFrom, isUuid } from "~/platform/uuid";
import type { Route } from "./+types/edition-new";

export async function loader({ request }: Route.LoaderArgs) {
  const search = new URL(request.url).searchParams;
  const [printId, draftId] = [search.get("print"), search.get("draft")];
  if (isUuid(draftId)) {
    const draft = await draftPlan(draftId);
    // Opened meanwhile, or deleted: its own page says which.
    if (draft === null) throw redirect(href("/studio/editions/:editionId", { editionId: draftId }));
    return { plan: draft.planning, answers: draft.answers, id: draft.id, isNew: false };
  }
  if (!isUuid(printId)) return { plan: null, prints: await studioPrints(printsAsked(new URLSearchParams())) };
  const plan = await planning(printId, FIRST_ANSWERS, null);
  if (plan === null) throw new AppError("not_found");
  return { plan, answers: FIRST_ANSWERS, id: newId(), isNew: true };
}

export async function action({ request, context }: Route.ActionArgs) {
  const studio = await theStudio();
  const typed = await readForm(request);
  const intent = String(typed.get("intent") ?? "save");
  const [id, printId] = [idFrom(String(typed.get("id"))), idFrom(String(typed.get("printId")))];
  const schema = editionForm({ currency: currencyCode(studio.currency), zone: studio.zone });
  const form = await parseForm(typed, schema);
  const worked = await workOut(printId, id, intent, form.answers);
  if (worked === null) throw new AppError("not_found");
  const back = (errors: Record<string, string[] | undefined>, status: number) =>
    data(
      {
        problem: { answers: worked.problem.answers, errors },
        plan: worked.planning,
        focus: worked.focus,
        attempt: newId(),
      },
      { status },
    );
  if (intent !== "save") return back(worked.problem.errors, 200);
  if (!form.ok) return back(form.errors, 400);
  const outcome = await saveDraft(context.get(signedInContext), form.value);
  if (outcome.kind === "no_such_paper") {
    const name = `formats[${outcome.format}].paperId`;
    return back({ [name]: ["That paper is no longer in use: choose another one."] }, 400);
  }
  throw redirect(href("/studio/editions/:editionId", { editionId: outcome.editionId }));
}

export default function PlanEdition({ loaderData, actionData }: Route.ComponentProps) {
  if (loaderData.plan === null) {
    return (
      <>
        <title>Plan an edition</title>
        <BenchHead title="Plan an edition" says="Of which print?" />
        <EditionPrints prints={loaderData.prints} />
      </>
    );
  }
  const { answers, id, isNew } = loaderData;
  const plan = actionData?.plan ?? loaderData.plan;
  const { print } = plan;
  const back = isNew
    ? href("/studio/prints/:printId", { printId: print.id })
    : href("/studio/editions/:editionId", { editionId: id });
  return (
    <>
      <title>{`Edition of ${print.title}`}</title>
      <BenchHead
        title={print.title}
        says={
          isNew
            ? "Plan an edition: sizes, limit, prices, release."
            : "The plan of an edition that is not open yet."
        }
        acts={<Link to={back}>{isNew ? "Back to the print" : "Back without changes"}</Link>}
      />
      <FormErrorSummary errors={formState(actionData?.problem).summary} title="The plan was not kept" />
      <EditionForm
        key={actionData?.attempt ?? id}
        hidden={{ id: firstAnswer(actionData?.problem.answers.id) ?? id, printId: print.id }}
        answers={answers}
        problem={actionData?.problem}
        figures={plan.figures}
        papers={plan.papers}
        currency={plan.currency}
        zoneLabel={plan.zoneLabel}
        focus={actionData?.focus ?? null}
      />
    </>
  );
}

function firstAnswer(answer: string | string[] | undefined): string | undefined {
  return Array.isArray(answer) ? answer[0] : answer;
}
