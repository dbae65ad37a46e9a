import { Form, href, Link } from "react-router";
import { Check } from "~/components/form/check";
import type { FormState } from "~/components/form/form-state";
import { Block } from "~/components/studio/bench";
import { CapStanding, FormatFiguresList } from "~/components/studio/edition-figures-list";
import { formatWords, sum } from "~/components/studio/edition-view";
import { EmptyState } from "~/components/ui/empty-state";
import { Facts } from "~/components/ui/facts";
import { Notice } from "~/components/ui/notice";
import { Press, PressLink } from "~/components/ui/press";
import { formatInstant } from "~/domain/dates";
import type { EditionFigures } from "~/domain/editions/edition-figures";
import type { EditionPage } from "~/domain/editions/edition-page.server";
import { countOfRun, type Run } from "~/domain/editions/numbering";
import { ladderRows } from "~/domain/pricing/ladder";

export type EditionDraftProps = {
  edition: EditionPage;
  figures: EditionFigures | null;
  /** What keeps it from being opened. */
  problems: readonly string[];
  form: FormState;
  mayOpen: boolean;
};

function outsideWords(edition: EditionPage): string {
  const runs = Object.entries(edition.outside) as [Exclude<Run, "numbered">, number][];
  const said = runs.filter(([, n]) => n > 0).map(([run, n]) => countOfRun(run, n));
  return said.length === 0 ? "none" : said.join(", ");
}

/** The facts of an edition that hold whether it is planned or open. */
export function editionFacts(edition: EditionPage) {
  const release =
    edition.releaseAt === null
      ? "as soon as it is opened"
      : formatInstant(edition.releaseAt, edition.zone, "en-GB");
  return [
    { term: "Outside the run", detail: outsideWords(edition) },
    { term: edition.released ? "Released" : "Release", detail: release },
    {
      term: "A number that comes back",
      detail:
        edition.returnedNumber === "retired"
          ? "is retired"
          : `is sold again at ${edition.returnedPrice === "own" ? "its own price" : "the next number's price"}`,
    },
    { term: "Further editions", detail: edition.furtherEditions || "nothing is said of them" },
  ];
}

/** A plan that is not open yet: what it says, what it comes to, and the step that fixes it. */
export function EditionDraft({ edition, figures, problems, form, mayOpen }: EditionDraftProps) {
  const plan = `${href("/studio/editions/new")}?draft=${edition.id}`;
  return (
    <div className="day" id="form">
      <div>
        <Block title="The plan" aside={mayOpen ? <Link to={plan}>Change the plan</Link> : null}>
          <Facts
            items={[{ term: "Limit", detail: `${edition.limit} numbered copies` }, ...editionFacts(edition)]}
          />
        </Block>
        {edition.formats.length === 0 ? (
          <EmptyState action={mayOpen ? <Link to={plan}>Change the plan</Link> : null}>
            It has no format yet: paper, process, sizes and prices.
          </EmptyState>
        ) : null}
        {edition.formats.map((format, f) => (
          <Block key={format.id} title={edition.formats.length > 1 ? `Format ${f + 1}` : "The format"}>
            <p>{formatWords(format)}</p>
            <ul className="plain-list">
              {ladderRows(format.steps).map((row) => (
                <li key={row.fromNumber}>
                  {row.fromNumber === row.toNumber
                    ? `Number ${row.fromNumber}`
                    : `Numbers ${row.fromNumber} to ${row.toNumber}`}
                  : <span className="money">{sum(row.amount, edition.currency)}</span>
                </li>
              ))}
            </ul>
            {figures?.formats[f] ? (
              <FormatFiguresList
                figures={figures.formats[f]}
                sheetsACopy={figures.sheetsACopy}
                currency={edition.currency}
              />
            ) : null}
          </Block>
        ))}
      </div>
      <div>
        {figures ? (
          <Block title="What it comes to">
            <CapStanding figures={figures} />
          </Block>
        ) : null}
        {mayOpen ? (
          <OpenStep edition={edition} figures={figures} problems={problems} form={form} plan={plan} />
        ) : null}
      </div>
    </div>
  );
}

type OpenStepProps = Pick<EditionDraftProps, "edition" | "figures" | "problems" | "form"> & { plan: string };

function OpenStep({ edition, figures, problems, form, plan }: OpenStepProps) {
  const pastCap = figures?.cap?.state === "past_cap";
  return (
    <Block title="Open the edition" id="open">
      {problems.length > 0 ? (
        <Notice kind="note" level={3} title="Before it can be opened">
          <ul>
            {problems.map((sentence) => (
              <li key={sentence}>{sentence}</li>
            ))}
          </ul>
          <PressLink small to={plan}>
            Change the plan
          </PressLink>
        </Notice>
      ) : (
        <>
          <p>From the moment it is opened, this is fixed:</p>
          <ul className="fixed-list">
            <li>
              Copies 1 to {edition.limit}, and those outside the run, stand in the book. The limit can never
              rise; from the first number issued it never changes.
            </li>
            <li>Paper, process and sizes of every format.</li>
            <li>The pictures of the print, the scans they rest on, and the crop.</li>
            <li>What is promised of further editions and of numbers that come back.</li>
          </ul>
          <p>
            Prices of numbers not issued can still change, dated and recorded, and so can the release until it
            has come.
          </p>
          {edition.print.state === "published" ? null : (
            <Notice kind="note" level={3} title="The print is not in the shop">
              <p>
                The edition can be opened, but nobody can buy it there until{" "}
                <Link to={href("/studio/prints/:printId", { printId: edition.print.id })}>the print</Link> is
                published.
              </p>
            </Notice>
          )}
          <Form method="post" className="bench-form">
            {pastCap ? (
              <Check
                label="I know that this takes the picture past the cap, and what that means for tax"
                {...form.box("acceptPastCap")}
              />
            ) : null}
            <div className="acts">
              <Press name="intent" value="open">
                Open the edition of {edition.limit}
              </Press>
            </div>
          </Form>
        </>
      )}
      <Form method="post" className="acts">
        <button type="submit" name="intent" value="delete" className="plain">
          Delete this draft
        </button>
      </Form>
    </Block>
  );
}
