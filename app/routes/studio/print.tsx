import { Form, href, redirect } from "react-router";
import { FormErrorSummary } from "~/components/form/form-error-summary";
import { formState } from "~/components/form/form-state";
import { BenchHead, Block } from "~/components/studio/bench";
import { PrintBeside } from "~/components/studio/print-beside";
import { PrintPictures, PrintStanding } from "~/components/studio/print-pictures";
import { PrintWords } from "~/components/studio/print-words";
import { Notice } from "~/components/ui/notice";
import { Press } from "~/components/ui/press";
import { signedInContext } from "~/context";
import { can } from "~/domain/people/permissions";
import { actOnPictures, editWords } from "~/domain/prints/edit-print.server";
import { printForm } from "~/domain/prints/print-form";
import { publishPrint, withdrawPrint } from "~/domain/prints/publish-print.server";
import {
  missingForPublishing,
  PRINT_STATE_WORDS,
  picturesFixedBecause,
  slugFixedBecause,
} from "~/domain/prints/publishing";
import { studioPrint, studioSeries } from "~/domain/prints/studio-prints.server";
import { theStudio } from "~/domain/studio/studio.server";
import { AppError } from "~/platform/errors";
import { formProblem, parseForm } from "~/platform/forms.server";
import { idFrom } from "~/platform/uuid";
import type { Route } from "./+types/print";

export async function loader({ params, context }: Route.LoaderArgs) {
  const { roles } = context.get(signedInContext);
  const print = await studioPrint(idFrom(params.printId));
  if (print === null) throw new AppError("not_found");
  const { zone, signature } = await theStudio();
  return {
    print,
    zone,
    signature,
    series: (await studioSeries()).map(({ id, title }) => ({ id, title })),
    missing: missingForPublishing({
      ...print,
      pictures: print.pictures.map((picture) => ({ ...picture, scanReady: picture.scan.ready })),
    }),
    mayChange: can(roles, "prints.change"),
    mayOpen: can(roles, "editions.open"),
  };
}

export async function action({ request, params, context }: Route.ActionArgs) {
  const actor = context.get(signedInContext);
  const printId = idFrom(params.printId);
  const form = await parseForm(request, printForm);
  if (!form.ok) return formProblem(form);
  const { value } = form;
  const here = href("/studio/prints/:printId", { printId });
  switch (value.intent) {
    case "words": {
      const outcome = await editWords(actor, printId, value);
      if (outcome.kind === "slug_taken") {
        return formProblem(form, { slug: ["Another print has that address: choose another one."] });
      }
      if (outcome.kind === "refused") return formProblem(form, { form: [outcome.sentence] });
      throw redirect(here);
    }
    case "publish": {
      const outcome = await publishPrint(actor, printId);
      if (outcome.kind === "missing") return formProblem(form, { form: outcome.sentences });
      throw redirect(here);
    }
    case "withdraw":
      await withdrawPrint(actor, printId);
      throw redirect(here);
  }
  const outcome = await actOnPictures(actor, printId, value);
  if (outcome.kind === "refused") return formProblem(form, { form: [outcome.sentence] });
  throw redirect(value.intent === "delete" ? href("/studio/prints") : here);
}

export default function Print({ loaderData, actionData }: Route.ComponentProps) {
  const { print, series, missing, mayChange, mayOpen, zone, signature } = loaderData;
  const problem = actionData?.problem;
  const intent = problem?.answers.intent;
  const about = problem?.answers.pictureId;
  const form = formState(intent === "words" ? problem : undefined, {
    title: print.title,
    year: print.year === null ? "" : String(print.year),
    seriesId: print.seriesId ?? "",
    slug: print.slug,
    statement: print.statement,
    shownBeforeRelease: print.shownBeforeRelease ? "on" : "",
  });
  const summary = formState(problem).summary.map((error) =>
    intent === "picture" && typeof about === "string" ? { ...error, id: `${about}-${error.id}` } : error,
  );
  return (
    <>
      <title>{print.title}</title>
      <BenchHead
        title={print.title}
        says={[
          print.pictures.length > 1 ? `a portfolio of ${print.pictures.length} pictures` : null,
          PRINT_STATE_WORDS[print.state],
        ]
          .filter(Boolean)
          .join(", ")}
        acts={
          mayChange ? (
            <PrintStanding
              state={print.state}
              missing={missing}
              slug={print.slug}
              mayDelete={print.state === "draft" && print.editions.length === 0}
            />
          ) : null
        }
      />
      <FormErrorSummary
        errors={summary}
        title={intent === "publish" ? "The print cannot be published yet" : "The print was not changed"}
      />
      {print.state !== "published" && missing.length > 0 && intent !== "publish" ? (
        <Notice kind="note" title="Before it can be published">
          <ul>
            {missing.map((sentence) => (
              <li key={sentence}>{sentence}</li>
            ))}
          </ul>
        </Notice>
      ) : null}
      <div className="day" id="form">
        <div>
          <Block title="Words">
            <Form method="post" preventScrollReset className="bench-form">
              <input type="hidden" name="intent" value="words" />
              <PrintWords
                form={form}
                series={series}
                slugFixed={slugFixedBecause(print.state)}
                yearHint="The year a sheet was printed belongs to the sheet."
              />
              {mayChange ? (
                <div className="acts">
                  <Press variant="outlined">Keep these words</Press>
                </div>
              ) : null}
            </Form>
          </Block>
          <PrintPictures
            printId={print.id}
            pictures={print.pictures}
            problem={intent === "picture" ? problem : undefined}
            fixed={picturesFixedBecause(print.editions)}
            mayChange={mayChange}
          />
        </div>
        <div>
          <PrintBeside print={print} zone={zone} signature={signature} mayOpen={mayOpen} />
        </div>
      </div>
    </>
  );
}
