import type { ReactNode } from "react";
import { Link } from "react-router";
import { Picture, type PictureProps } from "~/components/ui/picture";

export type FrameState = "queued" | "arriving" | "checking" | "working" | "ready" | "refused";

/** Width to height of the frame on the film. */
export type FrameShape =
  | "6x45"
  | "6x6"
  | "6x7"
  | "6x8"
  | "6x9"
  | "6x12"
  | "6x17"
  | "35mm"
  | "4x5"
  | "5x7"
  | "8x10";

export type ContactFrame = {
  /** The number burnt into the rebate: "7", "12A". */
  number: number | string;
  state: FrameState;
  /** Written in the window until there is a picture: "waits", "68 %", "Refused". */
  says?: string;
  /** Smaller, under it: "8-bit file". */
  saysMore?: string;
  /** How much has arrived, per cent; only while arriving. */
  percent?: number;
  /** The proofs, once ready. */
  picture?: Pick<PictureProps, "proofs" | "alt" | "sizes">;
  /** An address the browser made of the file being sent, to let it come up while it arrives. */
  preview?: string;
  /** "f/22, 6 s" */
  exposure?: string;
  /** "metered 4 s" */
  metered?: string;
  /** Where it stands, in words: "Arriving, 162 of 238 MB". */
  words: string;
  /** The words are a mark that should be seen: chosen, refused. */
  marked?: boolean;
  /** Outlined in grease pencil. */
  chosen?: boolean;
  /** The photographer's own pencil note. */
  note?: string;
  /** Where the frame leads. */
  to?: string;
  /** A press under the notes: retry, replace. */
  act?: ReactNode;
};

export type ContactSheetProps = {
  frames: readonly ContactFrame[];
  shape: FrameShape;
  /** Burnt into the rebate: the roll at the left, the film at the right. */
  rebate: { roll: string; film: string };
  /** Names the list: "Contact sheet of roll 214". */
  label: string;
};

/** All frames of a roll on one page, as printed by contact. */
export function ContactSheet({ frames, shape, rebate, label }: ContactSheetProps) {
  return (
    <ol className="contact" data-shape={shape} aria-label={label}>
      {frames.map((frame) => (
        <li key={frame.to ?? frame.number} className="frame" data-state={frame.state}>
          <div className="frame-film">
            <p className="rebate" aria-hidden="true">
              <span>{rebate.roll}</span>
              <span>{rebate.film}</span>
            </p>
            <FrameWindow frame={frame} />
            <p className="rebate">
              <span>
                <svg
                  className="tri"
                  width="4"
                  height="9"
                  viewBox="0 0 4 9"
                  aria-hidden="true"
                  focusable="false"
                >
                  <path d="M0 0L4 4.5L0 9Z" />
                </svg>
                <span className="vh">Frame </span>
                {frame.number}
              </span>
              <span aria-hidden="true">
                {/^\d+$/.test(String(frame.number)) ? `${frame.number}A` : frame.number}
              </span>
            </p>
          </div>
          <FrameNotes frame={frame} />
        </li>
      ))}
    </ol>
  );
}

function FrameWindow({ frame }: { frame: ContactFrame }) {
  const window = (
    <>
      {frame.picture ? (
        <Picture {...frame.picture} sizes={frame.picture.sizes ?? "20rem"} loading="lazy" />
      ) : null}
      {!frame.picture && frame.state === "arriving" ? (
        <ComingUp percent={frame.percent ?? 0} preview={frame.preview} />
      ) : null}
      {frame.picture || !frame.says ? null : (
        <p className={frame.state === "arriving" ? "say say-low" : "say"}>
          <b>{frame.says}</b> {frame.saysMore}
        </p>
      )}
      {frame.chosen ? <GreasePencil /> : null}
    </>
  );
  return frame.to ? (
    <Link className="frame-win" to={frame.to}>
      {window}
      {frame.picture ? null : <span className="vh">Frame {frame.number}</span>}
    </Link>
  ) : (
    <div className="frame-win">{window}</div>
  );
}

/** The scan comes up from the top of its window, as far as it has arrived. */
function ComingUp({ percent, preview }: { percent: number; preview?: string }) {
  return (
    <>
      {preview ? <img className="coming" src={preview} alt="" /> : null}
      <svg className="coming-edge" width="100%" height="100%" aria-hidden="true" focusable="false">
        {preview ? (
          <rect className="unseen" x="0" y={`${percent}%`} width="100%" height={`${100 - percent}%`} />
        ) : (
          <rect className="seen" x="0" y="0" width="100%" height={`${percent}%`} />
        )}
        <line x1="0" x2="100%" y1={`${percent}%`} y2={`${percent}%`} />
      </svg>
    </>
  );
}

function GreasePencil() {
  return (
    <svg
      className="grease"
      viewBox="0 0 100 80"
      preserveAspectRatio="none"
      aria-hidden="true"
      focusable="false"
    >
      <path
        d="M7 6.5C34 4.5 66 5.6 94.5 4.8C95.8 26 94.6 52 95.5 74.5C66 76.6 34 74.8 5.5 76.2C6.4 52 4.6 28 6.2 3.5"
        vectorEffect="non-scaling-stroke"
      />
    </svg>
  );
}

function FrameNotes({ frame }: { frame: ContactFrame }) {
  return (
    <div className="frame-notes">
      {frame.exposure ? <b>{frame.exposure}</b> : null}
      {frame.metered ? <span>{frame.metered}</span> : null}
      <span className={frame.marked ? "mark" : undefined}>{frame.words}</span>
      {frame.note ? <span className="pencil">{frame.note}</span> : null}
      {frame.act}
    </div>
  );
}
