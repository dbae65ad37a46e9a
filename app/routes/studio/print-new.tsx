import { Form, href, redirect } from "react-router";
import { TextArea } from "~/components/form/field";
import { FormErrorSummary } from "~/components/form/form-error-summary";
import { formState } from "~/components/form/form-state";
import { BenchHead } from "~/components/studio/bench";
import { PrintFrames } from "~/components/studio/print-frames";
import { PrintWords } from "~/components/studio/print-words";
import { studioPicture } from "~/components/studio/studio-picture";
import { Picture } from "~/components/ui/picture";
import { Press } from "~/components/ui/press";
import { signedInContext } from "~/context";
import { makePrint } from "~/domain/prints/make-print.server";
import { newPrintForm } from "~/domain/prints/print-form";
import { frameChoices, rollChoices, studioPrint, studioSeries } from "~/domain/prints/studio-prints.server";
import { formProblem, parseForm } from "~/platform/forms.server";
import { newId } from "~/platform/ids.server";
import { isUuid } from "~/platform/uuid";
import type { Route } from "./+types/print-new";

export async function loader({ request }: Route.LoaderArgs) {
  const search = new URL(request.url).searchParams;
  const ids = search.getAll("frame").filter(isUuid);
  const picked = await frameChoices({ ids });
  if (picked.length > 0) {
    const series = await studioSeries();
    const years = [...new Set(picked.flatMap((frame) => frame.year ?? []))];
    return {
      step: "words" as const,
      picked,
      series,
      year: years.length === 1 ? years[0] : null,
      id: newId(),
    };
  }
  const roll = search.get("roll");
  const to = search.get("to");
  const print = isUuid(to) ? await studioPrint(to) : null;
  return {
    step: "frames" as const,
    frames: await frameChoices(isUuid(roll) ? { rollId: roll } : "chosen"),
    rolls: await rollChoices(),
    rollId: isUuid(roll) ? roll : "",
    to: print === null ? null : { id: print.id, title: print.title },
  };
}

export async function action({ request, context }: Route.ActionArgs) {
  const form = await parseForm(request, newPrintForm);
  if (!form.ok) return formProblem(form);
  const outcome = await makePrint(context.get(signedInContext), form.value);
  if (outcome.kind === "slug_taken") {
    return formProblem(form, { slug: ["Another print has that address: choose another one."] });
  }
  if (outcome.kind === "not_scanned") {
    return formProblem(form, {
      form: [`A print needs a checked scan of every frame: ${outcome.labels.join(", ")} has none yet.`],
    });
  }
  throw redirect(href("/studio/prints/:printId", { printId: outcome.printId }));
}

export default function NewPrint({ loaderData, actionData }: Route.ComponentProps) {
  if (loaderData.step === "frames") {
    const { to } = loaderData;
    return (
      <>
        <title>{to === null ? "Make a print" : `Add to ${to.title}`}</title>
        <BenchHead
          title={to === null ? "Make a print" : `Add to ${to.title}`}
          says="Choose the frame, or several for a portfolio."
        />
        <PrintFrames {...loaderData} />
      </>
    );
  }
  const { picked, series, year, id } = loaderData;
  const form = formState(actionData?.problem, { year: year == null ? "" : String(year) });
  return (
    <>
      <title>Make a print</title>
      <BenchHead
        title={picked.length === 1 ? "Make a print" : "Make a portfolio"}
        says={picked.map((frame) => `Roll ${frame.rollNumber}, frame ${frame.label}`).join("; ")}
      />
      <FormErrorSummary errors={form.summary} title="The print was not made" />
      <div className="day" id="form">
        <div>
          <Form method="post" className="bench-form">
            <input type="hidden" name="id" value={form.value("id") ?? id} />
            {picked.map((frame) => (
              <input key={frame.id} type="hidden" name="frames" value={frame.id} />
            ))}
            <PrintWords
              form={form}
              series={series}
              slugFixed={null}
              yearHint={
                year == null ? "Its roll is not dated to a year." : `The roll was exposed in ${year}.`
              }
            />
            <TextArea
              label={
                picked.length === 1
                  ? "Description for those who cannot see it"
                  : "Description of the first picture, for those who cannot see it"
              }
              hint="What is to be seen. Needed before the print is published, not yet."
              rows={2}
              {...form.field("description")}
            />
            <div className="acts">
              <Press>{picked.length === 1 ? "Make the print" : "Make the portfolio"}</Press>
              <span className="quiet">The crop comes next.</span>
            </div>
          </Form>
        </div>
        <div>
          <div className="picked">
            {picked.map((frame) => (
              <Picture
                key={frame.id}
                {...studioPicture(frame.whole, `Roll ${frame.rollNumber}, frame ${frame.label}`)}
                sizes="23rem"
              />
            ))}
          </div>
        </div>
      </div>
    </>
  );
}
