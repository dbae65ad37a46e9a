import type { ReactNode } from "react";
import { Form } from "react-router";
import { Check } from "~/components/form/check";
import { Choices } from "~/components/form/choices";
import { Field, TextArea } from "~/components/form/field";
import { formState } from "~/components/form/form-state";
import { Select } from "~/components/form/select";
import { Block } from "~/components/studio/bench";
import { ReleaseFields } from "~/components/studio/edition-release";
import { StepRows } from "~/components/studio/edition-steps";
import { Press } from "~/components/ui/press";
import { type Act, actOf } from "~/domain/editions/edition-act-names";
import type { EditionPage } from "~/domain/editions/edition-page.server";
import { EMPTY_STEP, type StepRow, stepsOf } from "~/domain/editions/edition-rows";
import { canBePlaced, HAND_ACT_WORDS, HAND_ACTS } from "~/domain/editions/hand-acts";
import { spans } from "~/domain/editions/ledger-words";
import { wallClock } from "~/domain/editions/release-time";
import { PLACEMENT_WORDS } from "~/domain/editions/transitions";
import type { FormProblem } from "~/platform/form-fields";

export type EditionActsProps = {
  edition: EditionPage;
  problem: FormProblem | undefined;
  focus: string | null;
  /** Asked for in the address, or last sent and refused. */
  shown: Act | null;
  /** Each format's ladder as it is typed. */
  ladders: Record<string, StepRow[]>;
  may: { change: boolean; prices: boolean; place: boolean };
};

/** What can be done to an open or closed edition, one fold for each act. */
export function EditionActs({ edition, problem, focus, shown, ladders, may }: EditionActsProps) {
  const open = edition.state === "open";
  const own = (act: Act) => (actOf(problem?.answers.intent) === act ? problem : undefined);
  const fold = (act: Act, title: string, children: ReactNode) => (
    <details className="act-fold" open={shown === act} id={`act-${act}`}>
      <summary>{title}</summary>
      {children}
    </details>
  );
  const any = may.place || (open && (may.change || may.prices));
  if (!any) return null;
  return (
    <Block title="Acts">
      <div id="form">
        {may.place
          ? fold("place", "Place a copy by hand", <PlaceForm edition={edition} problem={own("place")} />)
          : null}
        {open && may.prices
          ? fold(
              "prices",
              "Change prices of numbers not issued",
              edition.formats.map((format, f) => (
                <PricesForm
                  key={format.id}
                  formatId={format.id}
                  title={edition.formats.length > 1 ? `Format ${f + 1}, ${format.paper.name}` : null}
                  currency={edition.currency}
                  steps={ladders[format.id] ?? [EMPTY_STEP]}
                  problem={own("prices")?.answers.formatId === format.id ? own("prices") : undefined}
                  focus={focus}
                />
              )),
            )
          : null}
        {open && may.change && !edition.released
          ? fold("release", "Move the release", <ReleaseForm edition={edition} problem={own("release")} />)
          : null}
        {open && may.change && edition.lowestLimit !== null && edition.lowestLimit < edition.limit
          ? fold(
              "lower-limit",
              "Lower the limit",
              <LimitForm edition={edition} problem={own("lower-limit")} />,
            )
          : null}
        {open && may.change
          ? fold("close", "Close the edition early", <CloseForm edition={edition} problem={own("close")} />)
          : null}
        {may.place
          ? fold("correct", "Put a line of the ledger right", <CorrectForm problem={own("correct")} />)
          : null}
      </div>
    </Block>
  );
}

type OwnProps = { edition: EditionPage; problem: FormProblem | undefined };

function PlaceForm({ edition, problem }: OwnProps) {
  const form = formState(problem);
  const movable = edition.copies.filter((copy) => canBePlaced(copy.placement));
  return (
    <Form method="post" preventScrollReset className="bench-form">
      <input type="hidden" name="intent" value="place" />
      <div className="fields fields-2">
        <Select
          label="Copy"
          {...form.field("copyId")}
          blank="Choose a copy"
          options={movable.map((copy) => ({
            value: copy.id,
            label: `${copy.mark}, ${PLACEMENT_WORDS[copy.placement]}`,
          }))}
        />
        <Field
          label="When it happened"
          hint="Left empty: now. Or 2026-11-29, 2026-11, 2026, unknown."
          {...form.field("happened")}
        />
      </div>
      <Choices
        legend="What happens to it"
        name="act"
        defaultValue={form.value("act")}
        error={form.error("act")}
        options={HAND_ACTS.map((act) => ({
          value: act,
          name: HAND_ACT_WORDS[act].name,
          more: HAND_ACT_WORDS[act].more,
        }))}
      />
      <div className="fields fields-2">
        <TextArea
          label="Why, or what for"
          hint="Needed to set aside and to retire. Kept with the line, seen in the studio only."
          rows={2}
          span
          {...form.field("reason")}
        />
        <Field label="Set aside until" type="date" width="middle" {...form.field("until")} />
        {edition.formats.length > 1 ? (
          <Select
            label="Given in the format"
            {...form.field("formatId")}
            blank="Choose a format"
            options={edition.formats.map((format, f) => ({
              value: format.id,
              label: `Format ${f + 1}: ${format.paper.name}, ${format.sheet.width} × ${format.sheet.height} mm`,
            }))}
          />
        ) : null}
        <Field label="Given to" hint="Name of the person or firm." {...form.field("toName")} />
        <Field
          label="Their e-mail address"
          hint="Where it is known: then they are one party of the book."
          type="email"
          {...form.field("toEmail")}
        />
      </div>
      <div className="acts">
        <Press>Write it into the book</Press>
      </div>
    </Form>
  );
}

type PricesFormProps = {
  formatId: string;
  title: string | null;
  currency: string;
  steps: readonly StepRow[];
  problem: FormProblem | undefined;
  focus: string | null;
};

function PricesForm({ formatId, title, currency, steps, problem, focus }: PricesFormProps) {
  const form = formState(problem);
  const typed = problem === undefined ? steps : stepsOf(problem.answers);
  return (
    <Form
      method="post"
      preventScrollReset
      className="bench-form"
      key={typed.map((step) => `${step.from}:${step.to}`).join()}
    >
      {title === null ? null : <h3>{title}</h3>}
      {/* Enter in a field sends the prices; it never takes a row away. */}
      <button type="submit" name="intent" value="prices" className="vh" tabIndex={-1} aria-hidden="true">
        Change the prices
      </button>
      <input type="hidden" name="formatId" value={formatId} />
      <StepRows
        at=""
        act=""
        prefix={`${formatId}-`}
        steps={typed}
        error={form.error}
        currency={currency}
        focus={problem === undefined ? null : focus}
      />
      <p className="hint">
        The price of a number that was ever issued stays. Who has a number on hold keeps the price of the
        hold.
      </p>
      <div className="acts">
        <Press name="intent" value="prices">
          Change the prices from now on
        </Press>
      </div>
    </Form>
  );
}

function ReleaseForm({ edition, problem }: OwnProps) {
  const at = edition.releaseAt === null ? null : wallClock(edition.releaseAt, edition.zone);
  const form = formState(problem, {
    release: "at",
    releaseDay: at?.day ?? "",
    releaseTime: at?.time ?? "18:00",
  });
  return (
    <Form method="post" preventScrollReset className="bench-form">
      <input type="hidden" name="intent" value="release" />
      <ReleaseFields form={form} zoneLabel={edition.zoneLabel} nowWords="Now" />
      <div className="acts">
        <Press>Move the release</Press>
      </div>
    </Form>
  );
}

function LimitForm({ edition, problem }: OwnProps) {
  const form = formState(problem);
  return (
    <Form method="post" preventScrollReset className="bench-form">
      <input type="hidden" name="intent" value="lower-limit" />
      <Field
        label="New limit"
        hint={`From ${edition.lowestLimit} to ${edition.limit - 1}. The copies past it go for good, and the ladder ends there.`}
        width="short"
        inputMode="numeric"
        {...form.field("limit")}
      />
      <div className="acts">
        <Press>Lower the limit</Press>
      </div>
    </Form>
  );
}

function CloseForm({ edition, problem }: OwnProps) {
  const form = formState(problem);
  const retired = edition.copies.filter(
    (copy) =>
      copy.run === "numbered" &&
      !copy.issued &&
      (copy.placement === "in_hand" || copy.placement === "set_aside"),
  );
  const aside = retired.filter((copy) => copy.placement === "set_aside").length;
  return (
    <Form method="post" preventScrollReset className="bench-form">
      <input type="hidden" name="intent" value="close" />
      <p>
        {retired.length === 0
          ? "No number is left to retire."
          : `${retired.length === 1 ? "One number" : `${retired.length} numbers`} never issued will be retired for good${
              aside > 0 ? `, ${aside} of them set aside now` : ""
            }: ${spans(retired.map((copy) => copy.number))}.`}{" "}
        The denominator stays {edition.limit}, as it was signed. A closed edition is not opened again.
      </p>
      <TextArea label="Why" rows={2} {...form.field("reason")} id="close-reason" />
      <Check label="Close it early, for good" {...form.box("sure")} />
      <div className="acts">
        <Press>Close the edition</Press>
      </div>
    </Form>
  );
}

function CorrectForm({ problem }: { problem: FormProblem | undefined }) {
  const form = formState(problem);
  return (
    <Form method="post" preventScrollReset className="bench-form">
      <input type="hidden" name="intent" value="correct" />
      <p className="quiet">
        The old line stays; the new one names it. A placement is not changed by it: what was done wrongly is
        undone by the act that undoes it.
      </p>
      <div className="fields fields-2">
        <Field label="Line" width="short" inputMode="numeric" {...form.field("line")} />
        <Field
          label="When it really happened"
          hint="Only where that was wrong: 2026-11-29, 2026-11, 2026, unknown."
          {...form.field("happened")}
          id="correct-happened"
        />
        <TextArea label="What is right" rows={2} span {...form.field("words")} />
      </div>
      <div className="acts">
        <Press>Write the correction</Press>
      </div>
    </Form>
  );
}
