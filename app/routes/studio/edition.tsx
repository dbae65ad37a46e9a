import { data, href, redirect } from "react-router";
import { FormErrorSummary } from "~/components/form/form-error-summary";
import { formState } from "~/components/form/form-state";
import { BenchHead } from "~/components/studio/bench";
import { EditionActs } from "~/components/studio/edition-acts-list";
import { EditionLedger, EditionTop } from "~/components/studio/edition-book";
import { EditionDraft } from "~/components/studio/edition-draft";
import { Notice } from "~/components/ui/notice";
import { signedInContext } from "~/context";
import { doEditionAct } from "~/domain/editions/do-edition-act.server";
import { problemsOfDraft } from "~/domain/editions/draft-edition.server";
import { ACTS, actOf } from "~/domain/editions/edition-act-names";
import { editionActs } from "~/domain/editions/edition-acts";
import { stepAnswers } from "~/domain/editions/edition-form";
import { editionPage, ledgerPage } from "~/domain/editions/edition-page.server";
import { actOnSteps } from "~/domain/editions/edition-rows";
import { draftPlan } from "~/domain/editions/plan-action.server";
import { studioActor } from "~/domain/editions/studio-actor";
import { can } from "~/domain/people/permissions";
import { theStudio } from "~/domain/studio/studio.server";
import { now } from "~/platform/clock";
import { AppError } from "~/platform/errors";
import { parseForm, readForm } from "~/platform/forms.server";
import { newId } from "~/platform/ids.server";
import { currencyCode } from "~/platform/money";
import { idFrom } from "~/platform/uuid";
import type { Route } from "./+types/edition";

export async function loader({ request, params, context }: Route.LoaderArgs) {
  const { roles } = context.get(signedInContext);
  const edition = await editionPage(idFrom(params.editionId));
  if (edition === null) throw new AppError("not_found");
  const search = new URL(request.url).searchParams;
  const draft = edition.state === "draft";
  return {
    edition,
    ladders: Object.fromEntries(
      edition.formats.map((format) => [format.id, stepAnswers(format.steps, currencyCode(edition.currency))]),
    ),
    ledger: await ledgerPage({ roles }, edition.id, Number(search.get("page")) || 1),
    figures: draft ? ((await draftPlan(edition.id))?.planning.figures ?? null) : null,
    problems: draft ? await problemsOfDraft(edition.id) : [],
    act: ACTS.find((act) => act === search.get("act")) ?? null,
    mayOpen: can(roles, "editions.open"),
    may: {
      change: can(roles, "editions.change"),
      prices: can(roles, "prices.change"),
      place: can(roles, "copies.place"),
    },
  };
}

export async function action({ request, params, context }: Route.ActionArgs) {
  const editionId = idFrom(params.editionId);
  const actor = studioActor(context.get(signedInContext));
  const { currency, zone } = await theStudio();
  const typed = await readForm(request);
  const form = await parseForm(typed, editionActs({ currency: currencyCode(currency), zone, now: now() }));
  const back = (errors: Record<string, string[] | undefined>, status = 400, focus: string | null = null) =>
    data({ problem: { answers: form.answers, errors }, focus, attempt: newId() }, { status });
  const rows = actOnSteps(String(typed.get("intent") ?? ""), form.answers);
  if (rows !== null) {
    return data({ problem: { answers: rows.answers, errors: {} }, focus: rows.focus, attempt: newId() });
  }
  if (!form.ok) return back(form.errors);
  const outcome = await doEditionAct(actor, editionId, form.value);
  if (outcome.kind === "refused") return back({ [outcome.field ?? "form"]: outcome.sentences });
  throw redirect(
    outcome.kind === "gone" ? href("/studio/editions") : href("/studio/editions/:editionId", { editionId }),
  );
}

export default function Edition({ loaderData, actionData }: Route.ComponentProps) {
  const { edition, ledger, ladders, figures, problems, act, mayOpen, may } = loaderData;
  const problem = actionData?.problem;
  const form = formState(problem);
  const shown = actOf(problem?.answers.intent) ?? act;
  const { formatId } = problem?.answers ?? {};
  // Ladders of several formats, and two forms that ask alike, stand on one page: their ids are told apart.
  const summary = form.summary.map((error) => {
    if (shown === "prices" && error.id.startsWith("steps["))
      return { ...error, id: `${formatId}-${error.id}` };
    if (shown === "close" && error.id === "reason") return { ...error, id: "close-reason" };
    if (shown === "correct" && error.id === "happened") return { ...error, id: "correct-happened" };
    return error;
  });
  return (
    <>
      <title>{`${edition.print.title}, edition of ${edition.limit}`}</title>
      <BenchHead
        title={edition.print.title}
        says={`Edition of ${edition.limit}, ${
          { draft: "planned, not open yet", open: "open", closed: "closed early" }[edition.state]
        }`}
      />
      <FormErrorSummary errors={summary} title="Nothing was written into the book" />
      {edition.state === "draft" ? (
        <EditionDraft edition={edition} figures={figures} problems={problems} form={form} mayOpen={mayOpen} />
      ) : (
        <>
          {edition.print.state === "published" ? null : (
            <Notice kind="note" title="The print is not in the shop">
              <p>Nobody can buy this edition there until its print is published.</p>
            </Notice>
          )}
          <EditionTop edition={edition}>
            <EditionActs
              key={actionData?.attempt ?? "first"}
              edition={edition}
              problem={problem}
              focus={actionData?.focus ?? null}
              shown={shown}
              ladders={ladders}
              may={may}
            />
          </EditionTop>
          <EditionLedger edition={edition} ledger={ledger} />
        </>
      )}
    </>
  );
}
