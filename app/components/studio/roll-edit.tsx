import { Form, href, Link } from "react-router";
import { FormErrorSummary } from "~/components/form/form-error-summary";
import type { FormState } from "~/components/form/form-state";
import { useBusy } from "~/components/form/use-busy";
import { RollFields, type RollFieldsProps } from "~/components/studio/roll-fields";
import { Notice } from "~/components/ui/notice";
import { Press } from "~/components/ui/press";
import { formatPartialDate } from "~/domain/dates";
import type { RollFacts, RollFrame } from "~/domain/rolls/roll-page.server";

/** What stands under the roll's number: "29 November 2026. 6x7 folding camera, 90 mm. ISO 125 traditional film." */
export function rollWords(roll: RollFacts): string {
  const exposed = formatPartialDate(roll.exposed, { languageTag: "en-GB", zone: "UTC", unknown: "" });
  return [exposed, roll.formatName, roll.camera, roll.film, roll.notes]
    .map((part) => part.trim().replace(/\.$/, ""))
    .filter((part) => part !== "")
    .map((part) => `${part}.`)
    .join(" ");
}

/** The roll's form as it is filled at first. */
export function rollAnswers(roll: RollFacts): Record<string, string> {
  return {
    number: String(roll.number),
    filmFormat: roll.filmFormat,
    camera: roll.camera,
    film: roll.film,
    exposed: roll.exposed.value,
    notes: roll.notes,
  };
}

export type RollEditProps = { form: FormState; formats: RollFieldsProps["formats"]; wrong: boolean };

/** The roll's own facts, folded away until somebody wants to change them. */
export function RollEdit({ form, formats, wrong }: RollEditProps) {
  const busy = useBusy("edit");
  return (
    <details className="act-fold" open={wrong}>
      <summary>Edit what is written of the roll</summary>
      <FormErrorSummary errors={form.summary} title="The roll was not changed" />
      <Form method="post" className="bench-form">
        <input type="hidden" name="intent" value="edit" />
        <RollFields form={form} formats={formats} />
        <div className="acts">
          <Press busy={busy}>Keep these words</Press>
        </div>
      </Form>
    </details>
  );
}

export type RollTroublesProps = { rollId: string; frames: readonly RollFrame[]; mayChange: boolean };

/** Files that were refused, and work that was given up: what happened, why, what to do. */
export function RollTroubles({ rollId, frames, mayChange }: RollTroublesProps) {
  const busy = useBusy("retry");
  const refused = frames.filter((frame) => frame.standing.needsLook && !frame.standing.canRetry);
  const failed = frames.filter((frame) => frame.standing.canRetry);
  return (
    <>
      {refused.length === 0 ? null : (
        <Notice kind="attention" title={titleOf(refused, "was refused", "files were refused")}>
          <ul className="trouble-list">
            {refused.map((frame) => (
              <li key={frame.id}>
                <b>“{frame.scan?.fileName}”</b>: {frame.standing.more}{" "}
                {mayChange ? (
                  <Link to={href("/studio/rolls/:rollId/frames/:frameId", { rollId, frameId: frame.id })}>
                    Choose another file for frame {frame.label}, or remove it
                  </Link>
                ) : null}
              </li>
            ))}
          </ul>
          <p>The other frames go on.</p>
        </Notice>
      )}
      {failed.length === 0 ? null : (
        <Notice kind="attention" title={titleOf(failed, "needs another try", "frames need another try")}>
          <ul className="trouble-list">
            {failed.map((frame) => (
              <li key={frame.id}>
                Frame {frame.label}: {frame.standing.words.toLowerCase()}. {frame.standing.more}
              </li>
            ))}
          </ul>
          {mayChange ? (
            <Form method="post" action={href("/studio/rolls/:rollId", { rollId })}>
              <Press small name="intent" value="retry" busy={busy}>
                Try again
              </Press>
            </Form>
          ) : null}
        </Notice>
      )}
    </>
  );
}

function titleOf(frames: readonly RollFrame[], one: string, many: string): string {
  return frames.length === 1 ? `Frame ${frames[0]?.label} ${one}` : `${frames.length} ${many}`;
}
