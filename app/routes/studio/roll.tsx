import { href, redirect } from "react-router";
import { formState } from "~/components/form/form-state";
import { BenchHead, Block } from "~/components/studio/bench";
import { RollEdit, RollTroubles, rollAnswers, rollWords } from "~/components/studio/roll-edit";
import { RollFiles } from "~/components/studio/roll-files";
import { RollSheet } from "~/components/studio/roll-sheet";
import { RollUploadsPanel, useLookAgain, useRollUploads } from "~/components/studio/roll-uploads";
import { EmptyState } from "~/components/ui/empty-state";
import { signedInContext } from "~/context";
import { can } from "~/domain/people/permissions";
import { editRoll } from "~/domain/rolls/edit-roll.server";
import { retryScans } from "~/domain/rolls/retry-scan.server";
import { FILM_FORMAT_OPTIONS, numberTaken, rollForm } from "~/domain/rolls/roll-form";
import { rollPage } from "~/domain/rolls/roll-page.server";
import { AppError } from "~/platform/errors";
import { formProblem, parseForm } from "~/platform/forms.server";
import { isUuid } from "~/platform/uuid";
import type { Route } from "./+types/roll";

export async function loader({ params, context }: Route.LoaderArgs) {
  const page = await rollPage(params.rollId);
  if (page === null) throw new AppError("not_found");
  const mayChange = can(context.get(signedInContext).roles, "rolls.change");
  return { ...page, mayChange, formats: FILM_FORMAT_OPTIONS };
}

export async function action({ request, params, context }: Route.ActionArgs) {
  const { rollId } = params;
  if (!isUuid(rollId)) throw new AppError("not_found");
  const actor = context.get(signedInContext);
  const form = await parseForm(request, rollForm);
  if (!form.ok) return formProblem(form);
  if (form.value.intent === "retry") {
    await retryScans(actor, { rollId });
  } else {
    const outcome = await editRoll(actor, rollId, form.value);
    if (outcome.code === "number_taken")
      return formProblem(form, { number: [numberTaken(form.value.number)] });
  }
  throw redirect(href("/studio/rolls/:rollId", { rollId }));
}

export default function Roll({ loaderData, actionData }: Route.ComponentProps) {
  const { roll, frames, mayChange, formats } = loaderData;
  const uploads = useRollUploads(roll.id);
  useLookAgain(frames.some((frame) => frame.standing.pending));
  const form = formState(actionData?.problem, rollAnswers(roll));
  const { files } = uploads.state;
  return (
    <>
      <title>{`Roll ${roll.number}`}</title>
      <BenchHead title={`Roll ${roll.number}`} says={rollWords(roll)} />
      {mayChange ? (
        <>
          <RollEdit form={form} formats={formats} wrong={actionData?.problem !== undefined} />
          <RollUploadsPanel
            uploads={uploads}
            label={frames.length === 0 ? "Scans of the roll" : "More scans"}
            hint="Choose them or drop them here, as many at once as you like: TIFF with 8 or 16 bits, JPEG or PNG. They take their order from their names."
          />
        </>
      ) : null}
      <RollTroubles rollId={roll.id} frames={frames} mayChange={mayChange} />
      {frames.length === 0 ? (
        <EmptyState>The contact sheet comes up here, frame by frame, as the scans arrive.</EmptyState>
      ) : (
        <>
          <RollSheet roll={roll} frames={frames} sent={files} />
          <Block title="Files" aside={`${frames.length} ${frames.length === 1 ? "frame" : "frames"}`}>
            <RollFiles rollId={roll.id} frames={frames} sent={files} />
          </Block>
        </>
      )}
    </>
  );
}
