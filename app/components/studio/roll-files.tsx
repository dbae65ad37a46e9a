import { href, Link } from "react-router";
import type { SentFile } from "~/components/studio/roll-sending";
import { underWay } from "~/components/studio/roll-sheet";
import { ProgressBar } from "~/components/ui/progress-bar";
import { Table } from "~/components/ui/table";
import type { RollFrame } from "~/domain/rolls/roll-page.server";
import { byteWords, pixelWords } from "~/domain/rolls/scan-words";

export type RollFilesProps = { rollId: string; frames: readonly RollFrame[]; sent: readonly SentFile[] };

/** The file of every frame: where it stands and, if it was not taken, why. */
export function RollFiles({ rollId, frames, sent }: RollFilesProps) {
  return (
    <Table
      caption="Files of the roll"
      rows={frames}
      rowKey={(frame) => frame.id}
      variant="dense"
      columns={[
        {
          key: "frame",
          head: "Frame",
          names: true,
          place: "first",
          cell: (frame) => (
            <Link to={href("/studio/rolls/:rollId/frames/:frameId", { rollId, frameId: frame.id })}>
              {frame.label}
            </Link>
          ),
        },
        {
          key: "file",
          head: "File",
          place: "main",
          cell: (frame) => <span className="file-name">{frame.scan?.fileName}</span>,
        },
        {
          key: "size",
          head: "Size",
          numeric: true,
          place: "sum",
          cell: (frame) => (frame.scan === null ? "" : byteWords(frame.scan.bytes)),
        },
        {
          key: "pixels",
          head: "Pixels",
          numeric: true,
          cell: (frame) => (frame.scan === null ? "" : pixelWords(frame.scan)),
        },
        {
          key: "stands",
          head: "Stands",
          cell: (frame) => <Stands frame={frame} file={underWay(frame, sent)} />,
        },
      ]}
    />
  );
}

function Stands({ frame, file }: { frame: RollFrame; file: SentFile | null }) {
  if (file !== null) {
    const percent = file.size === 0 ? 0 : Math.floor((100 * file.sent) / file.size);
    if (file.state === "failed") return <span className="wrong-word">Did not arrive. {file.problem}</span>;
    return (
      <span className="left-cell">
        <ProgressBar thin value={percent} label={`Frame ${frame.label}`} text={`${percent} %`} />
        <span className="fig">{file.state === "waiting" ? "waits its turn" : `${percent} %`}</span>
      </span>
    );
  }
  const { standing, scan } = frame;
  return (
    <>
      <span className={standing.needsLook ? "wrong-word" : undefined}>{standing.words}</span>
      {standing.more === null ? null : <span className="line">{standing.more}</span>}
      {scan?.sameAs ? <span className="line">The same file as {scan.sameAs}.</span> : null}
    </>
  );
}
