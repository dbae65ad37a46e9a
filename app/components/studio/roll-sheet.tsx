import { href } from "react-router";
import type { SentFile } from "~/components/studio/roll-sending";
import { studioPicture } from "~/components/studio/studio-picture";
import { type ContactFrame, ContactSheet, type FrameShape } from "~/components/ui/contact-sheet";
import type { PictureProps } from "~/components/ui/picture";
import type { RollFacts, RollFrame } from "~/domain/rolls/roll-page.server";
import { byteWords } from "~/domain/rolls/scan-words";

const SHAPES: Record<string, FrameShape> = {
  "120-6x4.5": "6x45",
  "120-6x6": "6x6",
  "120-6x7": "6x7",
  "120-6x8": "6x8",
  "120-6x9": "6x9",
  "120-6x12": "6x12",
  "120-6x17": "6x17",
  "120-6x24": "6x17",
  "135-24x36": "35mm",
  "sheet-4x5": "4x5",
};

/** The picture of a frame as the studio shows it; none until its proofs are there. */
export function framePicture(frame: Pick<RollFrame, "label" | "note" | "proofs">): PictureProps | null {
  const largest = frame.proofs.at(-1);
  if (largest === undefined) return null;
  const alt = `Frame ${frame.label}${frame.note === "" ? "" : `: ${frame.note}`}`;
  return studioPicture({ alt, proofs: frame.proofs, width: largest.width, height: largest.height });
}

export type RollSheetProps = { roll: RollFacts; frames: readonly RollFrame[]; sent: readonly SentFile[] };

/** The contact sheet of a roll: what the server knows, and over it what this page is sending. */
export function RollSheet({ roll, frames, sent }: RollSheetProps) {
  return (
    <ContactSheet
      label={`Contact sheet of roll ${roll.number}`}
      shape={SHAPES[roll.filmFormat] ?? "6x7"}
      rebate={{ roll: `${roll.initials} ${roll.number}`, film: shortFilm(roll.film) }}
      frames={frames.map((frame) => contactFrame(roll.id, frame, underWay(frame, sent)))}
    />
  );
}

/** What the film's edge has room for: its speed, or its first word. */
function shortFilm(film: string): string {
  return /\b\d{2,4}\b/.exec(film)?.[0] ?? film.split(" ")[0] ?? "";
}

/** The file of this frame that is not in yet; once the server has it, the server's word counts. */
export function underWay(frame: RollFrame, sent: readonly SentFile[]): SentFile | null {
  const file = sent.find((one) => one.scanId === frame.scan?.id);
  return file === undefined || file.state === "arrived" || !frame.standing.awaited ? null : file;
}

function contactFrame(rollId: string, frame: RollFrame, file: SentFile | null): ContactFrame {
  const { standing } = frame;
  const picture = framePicture(frame);
  const base: ContactFrame = {
    number: frame.label,
    state: standing.state,
    says: standing.says,
    words: standing.state === "ready" && frame.chosen ? "Chosen for a print" : standing.words,
    marked: standing.needsLook || frame.chosen,
    chosen: frame.chosen,
    to: href("/studio/rolls/:rollId/frames/:frameId", { rollId, frameId: frame.id }),
    ...(frame.note === "" ? {} : { note: frame.note }),
    ...(frame.exposure === "" ? {} : { exposure: frame.exposure }),
    ...(frame.metered === "" ? {} : { metered: frame.metered }),
    ...(picture === null ? {} : { picture }),
  };
  if (file === null) return base;
  const percent = file.size === 0 ? 0 : Math.floor((100 * file.sent) / file.size);
  const preview = file.preview === null ? {} : { preview: file.preview };
  switch (file.state) {
    case "waiting":
      return { ...base, state: "queued", says: "waits", words: "Waits its turn" };
    case "sending":
      return {
        ...base,
        ...preview,
        state: "arriving",
        percent,
        says: `${percent} %`,
        words: `Arriving, ${byteWords(file.sent)} of ${byteWords(file.size)}`,
      };
    default:
      return { ...base, state: "refused", says: "not here", words: "Did not arrive", marked: true };
  }
}
