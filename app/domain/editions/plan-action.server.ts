import { db } from "db/client.server";
import type { Answers, FieldErrors, FormProblem } from "~/platform/form-fields";
import { readDraft } from "./draft-edition.server";
import { answersOf } from "./edition-form";
import { actOnRows } from "./edition-rows";
import { type Planning, planning } from "./plan-edition.server";

/** What a press of the plan's form other than "save" comes back with. */
export type WorkedOut = {
  problem: FormProblem;
  focus: string | null;
  planning: Planning;
};

/**
 * Works a plan out from what was typed, after doing what the press asked of its rows. null when the print is none.
 * Nothing is kept.
 */
export async function workOut(
  printId: string,
  exceptEditionId: string | null,
  intent: string,
  answers: Answers,
): Promise<WorkedOut | null> {
  const before = await planning(printId, answers, exceptEditionId);
  if (before === null) return null;
  const picture = before.print.pictures[0];
  const act = actOnRows(
    intent,
    answers,
    picture === undefined ? null : { width: picture.widthPx, height: picture.heightPx },
  );
  if (act === null) return { problem: { errors: {}, answers }, focus: null, planning: before };
  const after = await planning(printId, act.answers, exceptEditionId);
  const errors: FieldErrors = act.said === null ? {} : { [act.focus]: [act.said] };
  return after === null
    ? null
    : { problem: { errors, answers: act.answers }, focus: act.focus, planning: after };
}

/** A draft and what its form shows; null when there is none. */
export async function draftPlan(
  editionId: string,
): Promise<{ id: string; answers: Answers; planning: Planning } | null> {
  const draft = await readDraft(db, editionId);
  if (draft === null) return null;
  const empty = await planning(draft.printId, {}, editionId);
  if (empty === null) return null;
  const answers = answersOf(draft.draft, empty);
  const plan = await planning(draft.printId, answers, editionId);
  return plan === null ? null : { id: editionId, answers, planning: plan };
}
