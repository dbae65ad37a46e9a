import { useRef } from "react";
import { Form } from "react-router";
import { Check } from "~/components/form/check";
import { Choices } from "~/components/form/choices";
import { Field } from "~/components/form/field";
import { Fieldset } from "~/components/form/fieldset";
import { type FormState, formState } from "~/components/form/form-state";
import { Block } from "~/components/studio/bench";
import { CapStanding } from "~/components/studio/edition-figures-list";
import { EditionFormat } from "~/components/studio/edition-format";
import { useLiveFigures } from "~/components/studio/edition-live-figures";
import { ReleaseFields } from "~/components/studio/edition-release";
import { Press } from "~/components/ui/press";
import type { EditionFigures } from "~/domain/editions/edition-figures";
import { rowsOf } from "~/domain/editions/edition-rows";
import type { PaperChoice } from "~/domain/editions/plan-edition.server";
import type { Answers, FormProblem } from "~/platform/form-fields";

export type EditionFormProps = {
  /** Fields that go with it unseen: the print, the draft's id. */
  hidden: Record<string, string>;
  answers: Answers;
  problem: FormProblem | undefined;
  /** As the server worked them out from the same answers. */
  figures: EditionFigures;
  papers: readonly PaperChoice[];
  currency: string;
  zoneLabel: string;
  /** Takes the focus when the form comes back from adding a row. */
  focus: string | null;
};

/** The plan of an edition, with its figures beside it: worked out again while it is filled in, or at a press. */
export function EditionForm({
  hidden,
  answers,
  problem,
  figures: first,
  papers,
  currency,
  zoneLabel,
  focus,
}: EditionFormProps) {
  const form = formState(problem, answers as Record<string, string>);
  const { formats } = rowsOf(problem?.answers ?? answers);
  const element = useRef<HTMLFormElement>(null);
  const { figures, changed } = useLiveFigures(element, first);

  return (
    <Form method="post" preventScrollReset ref={element} onChange={changed} className="edition-form">
      {/* Enter in a field works the figures out; it never saves or takes a row away. */}
      <button type="submit" name="intent" value="work-out" className="vh" tabIndex={-1} aria-hidden="true">
        Work it out
      </button>
      {Object.entries(hidden).map(([name, value]) => (
        <input key={name} type="hidden" name={name} value={value} />
      ))}
      <div className="day">
        <div>
          <Block title="The run">
            <RunFields form={form} usual={figures.proofsUsual} />
          </Block>
          {formats.map((row, f) => (
            <EditionFormat
              // biome-ignore lint/suspicious/noArrayIndexKey: rows have no other name; the form is made anew when they change
              key={f}
              row={row}
              index={f}
              many={formats.length > 1}
              form={form}
              papers={papers}
              currency={currency}
              figures={figures.formats[f]}
              sheetsACopy={figures.sheetsACopy}
              focus={focus}
            />
          ))}
          <div className="acts">
            <Press variant="outlined" small name="intent" value="add-format">
              Add a format to the same run
            </Press>
          </div>
          <Block title="The release">
            <ReleaseFields form={form} zoneLabel={zoneLabel} nowWords="As soon as the edition is opened" />
          </Block>
          <Block title="What is promised">
            <PolicyFields form={form} />
          </Block>
        </div>
        <div>
          <Block title="What it comes to">
            <div aria-live="polite">
              <CapStanding figures={figures} />
            </div>
            <div className="acts figures-acts">
              <Press variant="outlined" small name="intent" value="work-out">
                Work it out
              </Press>
            </div>
          </Block>
          <div className="form-acts">
            <Press name="intent" value="save">
              Keep as a draft
            </Press>
            <p className="hint">Nothing is fixed until the edition is opened, in a step of its own.</p>
          </div>
        </div>
      </div>
    </Form>
  );
}

function RunFields({ form, usual }: { form: FormState; usual: EditionFigures["proofsUsual"] }) {
  const count = { width: "short", inputMode: "numeric" } as const;
  const tenth =
    usual === null
      ? "A tenth of the limit is usual."
      : usual.floor === usual.ceil
        ? `A tenth is usual: ${usual.floor}.`
        : `A tenth is usual: ${usual.floor} or ${usual.ceil}.`;
  return (
    <div className="fields fields-2 run-fields">
      <Field
        label="Limit"
        hint="How many numbered copies. It can fall until the first number is issued, never rise."
        {...count}
        {...form.field("limit")}
        required
      />
      <Field label="Artist's proofs (AP)" hint={tenth} {...count} {...form.field("artistsProofs")} />
      <Field
        label="Printer's proofs (PP)"
        hint="For those who print."
        {...count}
        {...form.field("printersProofs")}
      />
      <Field label="Hors commerce (HC)" hint="Not for sale." {...count} {...form.field("horsCommerce")} />
      <Field label="Exhibition copies" hint="Not for sale." {...count} {...form.field("exhibitionCopies")} />
      <Check
        label="A reference sheet (BAT)"
        hint="The bon à tirer that every sheet is held against; one, or none."
        {...form.box("bonATirer")}
      />
    </div>
  );
}

function PolicyFields({ form }: { form: FormState }) {
  return (
    <Fieldset legend="" columns={1}>
      <Field
        label="Further editions"
        hint="One sentence for buyers and the certificate: whether this picture may appear in another edition or size."
        {...form.field("furtherEditions")}
        maxLength={500}
      />
      <Choices
        legend="A number that comes back"
        name="returnedNumber"
        defaultValue={form.value("returnedNumber")}
        error={form.error("returnedNumber")}
        options={[
          { value: "in_hand", name: "is sold again", more: "once its sheet has been looked over" },
          { value: "retired", name: "is retired", more: "it is never issued again" },
        ]}
      />
      <Choices
        legend="Sold again, it costs"
        name="returnedPrice"
        defaultValue={form.value("returnedPrice")}
        error={form.error("returnedPrice")}
        options={[
          { value: "own", name: "its own price on the ladder" },
          { value: "next", name: "what the next number costs then" },
        ]}
      />
      <p className="hint">Buyers are given the lowest free number.</p>
    </Fieldset>
  );
}
