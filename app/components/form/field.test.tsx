import { renderToStaticMarkup } from "react-dom/server";
import { describe, expect, it } from "vitest";
import { Choices } from "~/components/form/choices";
import { Field } from "~/components/form/field";
import { summaryErrors } from "~/components/form/field-errors";
import { FormErrorSummary } from "~/components/form/form-error-summary";

function attribute(markup: string, tag: string, name: string): string | undefined {
  return new RegExp(`<${tag}[^>]*\\s${name}="([^"]*)"`).exec(markup)?.[1];
}

describe("a field", () => {
  it("is tied to its label, its hint and its mistake", () => {
    const markup = renderToStaticMarkup(
      <Field name="postcode" label="Postcode" hint="With its space" error={["Write it out", "and again"]} />,
    );
    expect(attribute(markup, "label", "for")).toBe(attribute(markup, "input", "id"));
    expect(attribute(markup, "input", "aria-describedby")).toBe("postcode-hint postcode-wrong");
    expect(attribute(markup, "input", "aria-invalid")).toBe("true");
    expect(markup).toMatch(/id="postcode-wrong".*<span>Write it out<\/span>/s);
  });

  it("claims no mistake where there is none", () => {
    for (const error of [undefined, "", []]) {
      const markup = renderToStaticMarkup(<Field name="town" label="Town" error={error} />);
      expect(markup).not.toMatch(/aria-invalid|aria-describedby|data-wrong/);
    }
  });
});

describe("the summary of mistakes", () => {
  it("leads to the control of each, a group of choices by its first", () => {
    const errors = summaryErrors({
      town: ["Name the town"],
      way: ["Choose how it travels"],
      name: undefined,
    });
    const summary = renderToStaticMarkup(<FormErrorSummary title="Two answers" errors={errors} />);
    const form = renderToStaticMarkup(
      <>
        <Field name="town" label="Town" />
        <Choices name="way" legend="How it travels" options={[{ value: "flat", name: "Flat" }]} />
      </>,
    );
    const targets = [...summary.matchAll(/href="#([^"]+)"/g)].map((found) => found[1]);
    expect(targets).toEqual(["town", "way"]);
    for (const target of targets) expect(form).toMatch(new RegExp(`<input[^>]*id="${target}"`));
  });

  it("can take focus, and does so without script", () => {
    const markup = renderToStaticMarkup(
      <FormErrorSummary title="One answer" errors={[{ field: "a", id: "a", message: "No" }]} />,
    );
    expect(markup).toMatch(/role="alert"[^>]*tabindex="-1"[^>]*autofocus/);
    expect(renderToStaticMarkup(<FormErrorSummary title="None" errors={[]} />)).toBe("");
  });
});
