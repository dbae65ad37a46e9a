import { Form, href, redirect } from "react-router";
import { FormErrorSummary } from "~/components/form/form-error-summary";
import { formState } from "~/components/form/form-state";
import { useBusy } from "~/components/form/use-busy";
import { BenchHead } from "~/components/studio/bench";
import { RollFields } from "~/components/studio/roll-fields";
import { Press } from "~/components/ui/press";
import { signedInContext } from "~/context";
import { makeRoll } from "~/domain/rolls/make-roll.server";
import { FILM_FORMAT_OPTIONS, newRollForm, numberTaken } from "~/domain/rolls/roll-form";
import { nextRollNumber, usualRoll } from "~/domain/rolls/roll-list.server";
import { formProblem, parseForm } from "~/platform/forms.server";
import { newId } from "~/platform/ids.server";
import type { Route } from "./+types/roll-new";

export async function loader() {
  const [number, usual] = await Promise.all([nextRollNumber(), usualRoll()]);
  return { id: newId(), formats: FILM_FORMAT_OPTIONS, known: { number: String(number), ...usual } };
}

export async function action({ request, context }: Route.ActionArgs) {
  const form = await parseForm(request, newRollForm);
  if (!form.ok) return formProblem(form);
  const outcome = await makeRoll(context.get(signedInContext), form.value);
  if (outcome.code === "number_taken") return formProblem(form, { number: [numberTaken(form.value.number)] });
  throw redirect(href("/studio/rolls/:rollId", { rollId: outcome.rollId }));
}

export default function NewRoll({ loaderData: { id, formats, known }, actionData }: Route.ComponentProps) {
  const form = formState(actionData?.problem, known);
  const busy = useBusy();
  return (
    <>
      <title>Make a roll</title>
      <BenchHead title="Make a roll" says="What is written on its sleeve. The scans come next." />
      <FormErrorSummary errors={form.summary} title="The roll was not made" />
      <Form method="post" className="bench-form">
        <input type="hidden" name="id" value={form.value("id") ?? id} />
        <RollFields form={form} formats={formats} />
        <div className="acts">
          <Press busy={busy}>Make the roll</Press>
        </div>
      </Form>
    </>
  );
}
