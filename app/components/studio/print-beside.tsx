import { href, Link } from "react-router";
import { Block } from "~/components/studio/bench";
import { studioPicture } from "~/components/studio/studio-picture";
import { EmptyState } from "~/components/ui/empty-state";
import { Facts } from "~/components/ui/facts";
import { MountedPrint } from "~/components/ui/mounted-print";
import { PressLink } from "~/components/ui/press";
import { formatInstant } from "~/domain/dates";
import type { PrintEdition, StudioPrint } from "~/domain/prints/studio-prints.server";

export type PrintBesideProps = { print: StudioPrint; zone: string; signature: string; mayOpen: boolean };

/** "open, 12 of 25 left" */
function standing(edition: PrintEdition, zone: string): string {
  if (edition.state === "draft") return "draft";
  if (edition.state === "closed") return "closed";
  if (!edition.released && edition.releaseAt !== null) {
    return `to be released ${formatInstant(edition.releaseAt, zone, "en-GB")}`;
  }
  return `open, ${edition.left} of ${edition.limit} left`;
}

/** The print as it looks, its editions, and what else there is of its picture. */
export function PrintBeside({ print, zone, signature, mayOpen }: PrintBesideProps) {
  const first = print.pictures[0];
  const planned = `${href("/studio/editions/new")}?print=${print.id}`;
  return (
    <>
      {first ? (
        <MountedPrint
          setting="loose"
          picture={{
            ...studioPicture(first.shown),
            sizes: "23rem",
            waiting: first.proofState === "failed" ? "no proof" : "being proofed",
          }}
          marginLine={{
            title: print.title,
            signature: print.year === null ? signature : `${signature} ${print.year}`,
          }}
        />
      ) : null}
      <Block title="Editions" aside={mayOpen ? <Link to={planned}>Plan an edition</Link> : null}>
        {print.editions.length === 0 ? (
          <EmptyState action={mayOpen ? <PressLink to={planned}>Plan an edition</PressLink> : null}>
            An edition is planned once the crop is settled: it fixes the picture.
          </EmptyState>
        ) : (
          <ul className="plain-list">
            {print.editions.map((edition) => (
              <li key={edition.id}>
                <Link to={href("/studio/editions/:editionId", { editionId: edition.id })}>
                  Edition of {edition.limit}
                </Link>{" "}
                <span className="quiet">{standing(edition, zone)}</span>
              </li>
            ))}
          </ul>
        )}
      </Block>
      <Facts
        items={[
          ...(print.publishedAt === null
            ? []
            : [{ term: "Published", detail: formatInstant(print.publishedAt, zone, "en-GB") }]),
          ...(print.withdrawnAt === null
            ? []
            : [{ term: "Withdrawn", detail: formatInstant(print.withdrawnAt, zone, "en-GB") }]),
          {
            term: "Pictures public",
            detail:
              print.proofsPublicAt === null
                ? "no, only here"
                : `since ${formatInstant(print.proofsPublicAt, zone, "en-GB")}`,
          },
          ...(print.others.length === 0
            ? []
            : [
                {
                  term: "Same picture",
                  detail: print.others.map((other, at) => (
                    <span key={other.id}>
                      {at > 0 ? ", " : ""}
                      <Link to={href("/studio/prints/:printId", { printId: other.id })}>{other.title}</Link>
                    </span>
                  )),
                },
              ]),
        ]}
      />
    </>
  );
}
