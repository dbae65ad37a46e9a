import { href, redirect } from "react-router";
import { FormErrorSummary } from "~/components/form/form-error-summary";
import { formState } from "~/components/form/form-state";
import { BenchHead } from "~/components/studio/bench";
import { NewSeries, SeriesList } from "~/components/studio/print-series";
import { signedInContext } from "~/context";
import { can } from "~/domain/people/permissions";
import { moveSeries, writeSeries } from "~/domain/prints/order-prints.server";
import { seriesForm } from "~/domain/prints/print-form";
import { studioSeries } from "~/domain/prints/studio-prints.server";
import { formProblem, parseForm } from "~/platform/forms.server";
import { newId } from "~/platform/ids.server";
import type { Route } from "./+types/series";

const TAKEN = "Another series has that address: choose another one.";

export async function loader({ context }: Route.LoaderArgs) {
  return {
    series: await studioSeries(),
    newSeriesId: newId(),
    mayChange: can(context.get(signedInContext).roles, "prints.change"),
  };
}

export async function action({ request, context }: Route.ActionArgs) {
  const actor = context.get(signedInContext);
  const form = await parseForm(request, seriesForm);
  if (!form.ok) return formProblem(form);
  if (form.value.intent === "move") {
    await moveSeries(actor, form.value.id, form.value.to);
  } else {
    const outcome = await writeSeries(actor, form.value.intent, form.value.id, form.value);
    if (outcome.kind === "slug_taken") return formProblem(form, { slug: [TAKEN] });
  }
  throw redirect(href("/studio/series"));
}

export default function Series({ loaderData, actionData }: Route.ComponentProps) {
  const { series, newSeriesId, mayChange } = loaderData;
  const problem = actionData?.problem;
  const about = typeof problem?.answers.id === "string" ? problem.answers.id : null;
  const edited = series.some((one) => one.id === about) ? about : null;
  const form = formState(problem);
  const prefix = edited ?? "new";
  return (
    <>
      <title>Series</title>
      <BenchHead title="Series" says="Prints that belong together, from whatever camera." />
      <FormErrorSummary
        errors={form.summary.map((error) => ({ ...error, id: `${prefix}-${error.id}` }))}
        title="The series was not written down"
      />
      <SeriesList series={series} problem={edited === null ? undefined : problem} mayChange={mayChange} />
      {mayChange ? <NewSeries id={newSeriesId} problem={edited === null ? problem : undefined} /> : null}
    </>
  );
}
