import { href, redirect } from "react-router";
import { FormErrorSummary } from "~/components/form/form-error-summary";
import { formState } from "~/components/form/form-state";
import { BenchHead, Block } from "~/components/studio/bench";
import {
  FormerVersions,
  FrameNotesForm,
  FramePicture,
  FrameTrouble,
  PrintsOfFrame,
  RemoveFrame,
  ScanFacts,
} from "~/components/studio/roll-frame";
import { RollUploadsPanel, useLookAgain, useRollUploads } from "~/components/studio/roll-uploads";
import { signedInContext } from "~/context";
import { can } from "~/domain/people/permissions";
import { actOnFrame } from "~/domain/rolls/act-on-frame.server";
import { frameForm } from "~/domain/rolls/frame-form";
import { framePage } from "~/domain/rolls/roll-page.server";
import { AppError } from "~/platform/errors";
import { formProblem, parseForm } from "~/platform/forms.server";
import { isUuid } from "~/platform/uuid";
import type { Route } from "./+types/frame";

const REFUSED = {
  in_a_print: { form: ["A print rests on this frame, so it stays on the roll."] },
  has_a_scan: { sure: ["Say that its scan goes too, or leave the frame where it is."] },
};

export async function loader({ params, context }: Route.LoaderArgs) {
  const page = await framePage(params.rollId, params.frameId);
  if (page === null) throw new AppError("not_found");
  return { page, mayChange: can(context.get(signedInContext).roles, "rolls.change") };
}

export async function action({ request, params, context }: Route.ActionArgs) {
  const { rollId, frameId } = params;
  if (!isUuid(rollId) || !isUuid(frameId)) throw new AppError("not_found");
  const form = await parseForm(request, frameForm);
  if (!form.ok) return formProblem(form);
  const outcome = await actOnFrame(context.get(signedInContext), { rollId, frameId }, form.value);
  if (outcome.code === "removed") throw redirect(href("/studio/rolls/:rollId", { rollId }));
  if (outcome.code !== "done") return formProblem(form, REFUSED[outcome.code]);
  throw redirect(href("/studio/rolls/:rollId/frames/:frameId", { rollId, frameId }));
}

export default function Frame({ loaderData: { page, mayChange }, actionData }: Route.ComponentProps) {
  const { roll, frame, versions, prints } = page;
  const uploads = useRollUploads(roll.id);
  useLookAgain(frame.standing.pending);
  const form = formState(actionData?.problem, frame.fields);
  const [newest, ...former] = versions;
  return (
    <>
      <title>{`Roll ${roll.number}, frame ${frame.label}`}</title>
      <BenchHead
        title={`Frame ${frame.label}`}
        says={`Roll ${roll.number}${frame.note === "" ? "" : `: ${frame.note}`}`}
      />
      <FormErrorSummary errors={form.summary} title="The frame was not changed" />
      <div className="day">
        <div>
          <FramePicture page={page} mayChange={mayChange} />
          <FrameTrouble page={page} mayChange={mayChange} />
          {mayChange ? <FrameNotesForm key={frame.id} form={form} /> : null}
        </div>
        <div>
          <Block title="Scan" aside={newest === undefined ? "none" : `version ${newest.version}`}>
            {newest === undefined ? null : <ScanFacts scan={newest} />}
            <FormerVersions versions={former} />
          </Block>
          {mayChange ? (
            <RollUploadsPanel
              uploads={uploads}
              frameId={frame.id}
              label={newest?.sha256 ? "A better scan of this frame" : "The scan of this frame"}
              hint="It becomes a new version; the old one is kept, and prints keep the version they were made from."
            />
          ) : null}
          <Block title="Prints">
            <PrintsOfFrame prints={prints} />
          </Block>
          {mayChange ? (
            <Block title="Off the roll">
              <RemoveFrame page={page} form={form} />
            </Block>
          ) : null}
        </div>
      </div>
    </>
  );
}
