import { Form, href, Link } from "react-router";
import { Check } from "~/components/form/check";
import { Field, TextArea } from "~/components/form/field";
import { Fieldset } from "~/components/form/fieldset";
import type { FormState } from "~/components/form/form-state";
import { useBusy } from "~/components/form/use-busy";
import { MoveButtons } from "~/components/studio/move-buttons";
import { framePicture } from "~/components/studio/roll-sheet";
import { Facts } from "~/components/ui/facts";
import { Notice } from "~/components/ui/notice";
import { Picture } from "~/components/ui/picture";
import { Press, PressLink } from "~/components/ui/press";
import type { FramePage, ShownScan } from "~/domain/rolls/roll-page.server";
import { byteWords, pixelWords } from "~/domain/rolls/scan-words";

type Part = { page: FramePage; mayChange: boolean };

/** The frame large, with the presses that belong to it. */
export function FramePicture({ page: { roll, frame, earlier, later }, mayChange }: Part) {
  const picture = framePicture(frame);
  const busy = useBusy("choose");
  return (
    <div className="frame-large">
      {picture === null ? (
        <Picture
          proofs={[]}
          alt=""
          width={frame.scan?.width ?? 5}
          height={frame.scan?.height ?? 4}
          waiting={frame.standing.words}
        />
      ) : (
        <Picture {...picture} sizes="(min-width: 75rem) 50rem, 100vw" fetchPriority="high" />
      )}
      <p className="frame-line">
        <span>
          {frame.exposure === ""
            ? "Exposure not noted"
            : [frame.exposure, frame.metered].filter(Boolean).join(", ")}
        </span>
        <span className={frame.standing.needsLook || frame.chosen ? "mark" : undefined}>
          {frame.chosen && !frame.standing.needsLook ? "Chosen for a print" : frame.standing.words}
        </span>
      </p>
      {mayChange ? (
        <div className="acts">
          <Form method="post" preventScrollReset>
            <input type="hidden" name="intent" value="choose" />
            <Press variant="outlined" small name="chosen" value={frame.chosen ? "no" : "yes"} busy={busy}>
              {frame.chosen ? "Take the pencil mark away" : "Mark as chosen"}
            </Press>
          </Form>
          {frame.scan?.standing.state === "ready" || frame.proofs.length > 0 ? (
            <PressLink small to={`${href("/studio/prints/new")}?frame=${frame.id}`}>
              Make a print from this frame
            </PressLink>
          ) : null}
          <MoveButtons
            of={`frame ${frame.label}`}
            fields={{ intent: "move" }}
            first={earlier === null}
            last={later === null}
          />
        </div>
      ) : null}
      <nav className="frame-way" aria-label={`Frames of roll ${roll.number}`}>
        <Way rollId={roll.id} to={earlier} word="Earlier" />
        <Link to={href("/studio/rolls/:rollId", { rollId: roll.id })}>Contact sheet</Link>
        <Way rollId={roll.id} to={later} word="Later" />
      </nav>
    </div>
  );
}

function Way({
  rollId,
  to,
  word,
}: {
  rollId: string;
  to: { id: string; label: string } | null;
  word: string;
}) {
  if (to === null) return <span className="quiet">{word}: none</span>;
  return (
    <Link to={href("/studio/rolls/:rollId/frames/:frameId", { rollId, frameId: to.id })}>
      {word}: frame {to.label}
    </Link>
  );
}

/** What went wrong with the newest scan, and the press that has it tried again. */
export function FrameTrouble({ page: { frame }, mayChange }: Part) {
  const busy = useBusy("retry");
  const { standing, scan } = frame;
  if (standing.more === null && !scan?.sameAs) return null;
  return (
    <>
      {standing.more === null ? null : (
        <Notice kind={standing.needsLook ? "attention" : "note"} title={standing.words}>
          <p>{standing.more}</p>
          {standing.canRetry && mayChange ? (
            <Form method="post">
              <Press small name="intent" value="retry" busy={busy}>
                Try again
              </Press>
            </Form>
          ) : null}
        </Notice>
      )}
      {scan?.sameAs ? (
        <Notice kind="note" title="The studio has this file already">
          <p>It is the same, byte for byte, as {scan.sameAs}.</p>
        </Notice>
      ) : null}
    </>
  );
}

/** How the frame was exposed, and the photographer's note. */
export function FrameNotesForm({ form }: { form: FormState }) {
  const busy = useBusy("notes");
  return (
    <Form method="post" className="bench-form" preventScrollReset>
      <input type="hidden" name="intent" value="notes" />
      <Fieldset legend="How it was exposed" columns={2}>
        <Field label="Number on the film’s edge" width="short" required {...form.field("label")} />
        <Field label="Aperture" hint="f/22" width="short" {...form.field("aperture")} />
        <Field label="Time" hint="1/125, 6, 4 min" width="short" {...form.field("time")} />
        <Field label="Metered time" hint="before reciprocity" width="short" {...form.field("metered")} />
        <Field label="Lens" {...form.field("lens")} />
        <Field label="Filter" {...form.field("filter")} />
        <Field label="Light" hint="fog, second frost" {...form.field("light")} />
        <Field label="Place" {...form.field("place")} />
        <TextArea
          label="Note"
          hint="In pencil, on the contact sheet."
          rows={2}
          span
          {...form.field("note")}
        />
      </Fieldset>
      <div className="acts">
        <Press busy={busy}>Keep these notes</Press>
      </div>
    </Form>
  );
}

/** What is known of one version of the scan. */
export function ScanFacts({ scan }: { scan: ShownScan }) {
  const eightBit = scan.standing.state === "ready" && scan.bitDepth === 8;
  return (
    <>
      <Facts
        items={[
          { term: "File", detail: <span className="file-name">{scan.fileName}</span> },
          { term: "Size", detail: byteWords(scan.bytes) },
          ...(scan.width === null ? [] : [{ term: "Pixels", detail: pixelWords(scan) }]),
          ...(scan.pixelsPerInch === null
            ? []
            : [{ term: "Scanned at", detail: `${scan.pixelsPerInch} pixels an inch, as the file says` }]),
          ...(scan.sha256 === null
            ? []
            : [
                { term: "Tones and colours", detail: scan.colourSpace || "without a profile" },
                { term: "SHA-256", detail: <span className="file-name">{scan.sha256}</span> },
              ]),
          { term: "Stands", detail: scan.standing.words },
        ]}
      />
      {eightBit ? (
        <p className="note">
          With 8 bits a channel, long slopes such as fog and sky may break into steps in a large print.
        </p>
      ) : null}
    </>
  );
}

/** The versions before the newest one; they are kept. */
export function FormerVersions({ versions }: { versions: readonly ShownScan[] }) {
  if (versions.length === 0) return null;
  return (
    <ul className="plain-list">
      {versions.map((scan) => (
        <li key={scan.id}>
          Version {scan.version}, <span className="file-name">{scan.fileName}</span>
          <span className="line quiet">
            {[pixelWords(scan), byteWords(scan.bytes), scan.standing.words.toLowerCase()]
              .filter(Boolean)
              .join(", ")}
          </span>
        </li>
      ))}
    </ul>
  );
}

const PRINT_WORDS = { draft: "draft", published: "in the shop", withdrawn: "withdrawn" } as const;

/** The prints that rest on the frame. */
export function PrintsOfFrame({ prints }: { prints: FramePage["prints"] }) {
  if (prints.length === 0) return <p className="quiet">No print has been made of it.</p>;
  return (
    <ul className="plain-list">
      {prints.map((print) => (
        <li key={print.id}>
          <Link to={href("/studio/prints/:printId", { printId: print.id })}>{print.title}</Link>,{" "}
          {PRINT_WORDS[print.state]}
        </li>
      ))}
    </ul>
  );
}

/** Taking the frame off the roll; a scan that counts goes only when that is said. */
export function RemoveFrame({ page, form }: { page: FramePage; form: FormState }) {
  const busy = useBusy("remove");
  if (page.prints.length > 0) {
    return <p className="quiet">It stays on the roll: a print rests on it.</p>;
  }
  const hasScan = page.versions.some((scan) => scan.sha256 !== null || scan.standing.pending);
  return (
    <Form method="post" className="bench-form">
      <input type="hidden" name="intent" value="remove" />
      {hasScan ? (
        <Check
          label="Its scan goes too, for good"
          hint="For frames that show nothing. The scan is deleted from storage in every version."
          {...form.box("sure")}
        />
      ) : null}
      <div className="acts">
        <Press variant="outlined" small busy={busy}>
          Remove frame {page.frame.label}
        </Press>
      </div>
    </Form>
  );
}
