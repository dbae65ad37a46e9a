import { Form, href, Link } from "react-router";
import { Field, TextArea } from "~/components/form/field";
import { type FormState, formState } from "~/components/form/form-state";
import { Block } from "~/components/studio/bench";
import { MoveButtons } from "~/components/studio/move-buttons";
import { EmptyState } from "~/components/ui/empty-state";
import { Press } from "~/components/ui/press";
import { PRINT_STATE_WORDS } from "~/domain/prints/publishing";
import type { SeriesLine } from "~/domain/prints/studio-prints.server";
import type { FormProblem } from "~/platform/form-fields";

export type SeriesListProps = {
  series: readonly SeriesLine[];
  /** What was wrong with the one last sent. */
  problem: FormProblem | undefined;
  mayChange: boolean;
};

/** Every series with its prints, and its words to change. */
export function SeriesList({ series, problem, mayChange }: SeriesListProps) {
  if (series.length === 0) return <EmptyState>A series will stand here once one has been made.</EmptyState>;
  return series.map((one, at) => (
    <Block
      key={one.id}
      title={one.title}
      aside={
        mayChange ? (
          <MoveButtons
            of={one.title}
            fields={{ intent: "move", id: one.id }}
            first={at === 0}
            last={at === series.length - 1}
          />
        ) : null
      }
    >
      {one.prints.length === 0 ? (
        <p className="quiet">No print is in it yet: choose it on a print's page.</p>
      ) : (
        <ol className="plain-list">
          {one.prints.map((print) => (
            <li key={print.id}>
              <Link className="title-it" to={href("/studio/prints/:printId", { printId: print.id })}>
                {print.title}
              </Link>{" "}
              <span className="quiet">{PRINT_STATE_WORDS[print.state]}</span>
            </li>
          ))}
        </ol>
      )}
      {mayChange ? (
        <details className="act-fold" open={problem?.answers.id === one.id}>
          <summary>Change the words of {one.title}</summary>
          <Form method="post" className="bench-form">
            <input type="hidden" name="intent" value="edit" />
            <input type="hidden" name="id" value={one.id} />
            <Fields
              prefix={one.id}
              form={formState(problem?.answers.id === one.id ? problem : undefined, {
                title: one.title,
                slug: one.slug,
                statement: one.statement,
              })}
            />
            <div className="acts">
              <Press variant="outlined">Keep these words</Press>
            </div>
          </Form>
        </details>
      ) : null}
    </Block>
  ));
}

export type NewSeriesProps = { id: string; problem: FormProblem | undefined };

/** Makes a series. */
export function NewSeries({ id, problem }: NewSeriesProps) {
  const form = formState(problem);
  return (
    <Block title="Make a series">
      <Form method="post" className="bench-form" key={id}>
        <input type="hidden" name="intent" value="make" />
        <input type="hidden" name="id" value={form.value("id") ?? id} />
        <Fields prefix="new" form={form} />
        <div className="acts">
          <Press>Make the series</Press>
        </div>
      </Form>
    </Block>
  );
}

function Fields({ prefix, form }: { prefix: string; form: FormState }) {
  return (
    <div className="fields fields-2">
      <Field id={`${prefix}-title`} label="Title" {...form.field("title")} required />
      <Field
        id={`${prefix}-slug`}
        label="Address"
        hint="Left empty, it is made from the title. People keep addresses: change it only while few have seen it."
        {...form.field("slug")}
      />
      <TextArea
        id={`${prefix}-statement`}
        label="Statement"
        hint="Shown on the page of the series."
        span
        rows={3}
        {...form.field("statement")}
      />
    </div>
  );
}
