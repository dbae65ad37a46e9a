import { Form, href, Link } from "react-router";
import { FilterBar } from "~/components/form/filter-bar";
import { Select } from "~/components/form/select";
import { studioPicture } from "~/components/studio/studio-picture";
import { EmptyState } from "~/components/ui/empty-state";
import { Picture } from "~/components/ui/picture";
import { Press } from "~/components/ui/press";
import type { FrameChoice } from "~/domain/prints/studio-prints.server";

export type PrintFramesProps = {
  frames: readonly FrameChoice[];
  rolls: readonly { id: string; number: number }[];
  rollId: string;
  /** A print the frames are added to; null to make a new one. */
  to: { id: string; title: string } | null;
};

/** Frames to choose from, of a roll or all that were marked as chosen. */
export function PrintFrames({ frames, rolls, rollId, to }: PrintFramesProps) {
  return (
    <>
      <FilterBar label="Find frames" submit="Show">
        {to === null ? null : <input type="hidden" name="to" value={to.id} />}
        <Select
          label="Frames of"
          name="roll"
          defaultValue={rollId}
          blank="All rolls, the chosen ones"
          options={rolls.map((roll) => ({ value: roll.id, label: `Roll ${roll.number}` }))}
        />
      </FilterBar>
      {frames.length === 0 ? (
        <EmptyState action={<Link to={href("/studio/rolls")}>Go to the rolls</Link>}>
          Frames marked as chosen on their contact sheets will stand here; or look through a single roll.
        </EmptyState>
      ) : (
        <Form
          method={to === null ? "get" : "post"}
          action={
            to === null ? href("/studio/prints/new") : href("/studio/prints/:printId", { printId: to.id })
          }
          className="bench-form"
        >
          {to === null ? null : <input type="hidden" name="intent" value="add-pictures" />}
          <fieldset>
            <legend className="vh">Frames</legend>
            <ul className="frame-choices">
              {frames.map((frame) => (
                <li key={frame.id}>
                  <label>
                    <Picture {...studioPicture(frame.whole, "")} sizes="9rem" loading="lazy" />
                    <span className="check-line">
                      <input
                        type="checkbox"
                        name={to === null ? "frame" : "frames"}
                        value={frame.id}
                        disabled={!frame.scanReady}
                      />
                      <span>
                        Roll {frame.rollNumber}, frame {frame.label}
                        {frame.scanReady ? null : <span className="quiet">, its scan is not in yet</span>}
                      </span>
                    </span>
                  </label>
                </li>
              ))}
            </ul>
          </fieldset>
          <div className="acts">
            <Press>{to === null ? "Make a print of these" : `Add to ${to.title}`}</Press>
            <span className="quiet">One frame is a print; several are a portfolio.</span>
          </div>
        </Form>
      )}
    </>
  );
}
