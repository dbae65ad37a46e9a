import { href, Link } from "react-router";
import { studioPicture } from "~/components/studio/studio-picture";
import { EmptyState } from "~/components/ui/empty-state";
import { Picture } from "~/components/ui/picture";
import { PressLink } from "~/components/ui/press";
import { Table } from "~/components/ui/table";
import { formatPartialDate } from "~/domain/dates";
import type { RollLine } from "~/domain/rolls/roll-list.server";

/** "3 need a look", "4 on their way", "all in" */
function scanWords(roll: RollLine): string {
  if (roll.frames === 0) return "no scans yet";
  const parts = [
    roll.needsLook > 0 ? `${roll.needsLook} ${roll.needsLook === 1 ? "needs" : "need"} a look` : null,
    roll.pending > 0 ? `${roll.pending} at work` : null,
  ].filter((part) => part !== null);
  return parts.length === 0 ? "in" : parts.join(", ");
}

/** Rolls, the latest first. */
export function RollTable({ rolls, mayChange }: { rolls: readonly RollLine[]; mayChange: boolean }) {
  return (
    <Table
      caption="Rolls"
      rows={rolls}
      rowKey={(roll) => roll.id}
      empty={
        <EmptyState
          action={
            mayChange ? (
              <PressLink small to={href("/studio/rolls/new")}>
                Make the first roll
              </PressLink>
            ) : null
          }
        >
          Films that come home stand here, each with its contact sheet.
        </EmptyState>
      }
      columns={[
        {
          key: "picture",
          head: "Picture",
          headHidden: true,
          cell: (roll) => (
            <div className="thumb">
              <Picture
                {...studioPicture({
                  alt: "",
                  proofs: roll.proofs,
                  width: roll.size?.width ?? 5,
                  height: roll.size?.height ?? 4,
                })}
                sizes="4.5rem"
                loading="lazy"
              />
            </div>
          ),
        },
        {
          key: "number",
          head: "Roll",
          names: true,
          cell: (roll) => (
            <Link to={href("/studio/rolls/:rollId", { rollId: roll.id })}>Roll {roll.number}</Link>
          ),
        },
        {
          key: "exposed",
          head: "Exposed",
          cell: (roll) =>
            formatPartialDate(roll.exposed, { languageTag: "en-GB", zone: "UTC", unknown: "not dated" }),
        },
        {
          key: "made",
          head: "Made with",
          cell: (roll) => (
            <>
              <span className="line">{roll.camera || roll.format}</span>
              <span className="quiet">
                {[roll.camera === "" ? "" : roll.format, roll.film].filter(Boolean).join(", ")}
              </span>
            </>
          ),
        },
        { key: "frames", head: "Frames", numeric: true, cell: (roll) => roll.frames },
        { key: "chosen", head: "Chosen", numeric: true, cell: (roll) => roll.chosen },
        {
          key: "scans",
          head: "Scans",
          cell: (roll) => (
            <span className={roll.needsLook > 0 ? "wrong-word" : undefined}>{scanWords(roll)}</span>
          ),
        },
      ]}
    />
  );
}
