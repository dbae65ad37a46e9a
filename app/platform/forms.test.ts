import { describe, expect, it } from "vitest";
import { z } from "zod";
import { emailAddress, line, many, optionalText, ticked, wholeNumber } from "./form-fields";
import { formProblem, parseForm } from "./forms.server";

function form(fields: [string, string][]): FormData {
  const data = new FormData();
  for (const [name, value] of fields) data.append(name, value);
  return data;
}

describe("parseForm", () => {
  const person = z.object({
    name: line("nameMissing"),
    email: emailAddress("emailWrong"),
    password: z.string().min(3),
    note: optionalText(20),
    agreed: ticked(),
  });

  it("trims text, keeps passwords as typed, and makes line breaks one kind", async () => {
    const parsed = await parseForm(
      form([
        ["name", "  Ida Ember "],
        ["email", " ida@ember.example "],
        ["password", " two words "],
        ["note", "a\r\nb"],
        ["agreed", "on"],
      ]),
      person,
    );
    expect(parsed).toMatchObject({
      ok: true,
      value: {
        name: "Ida Ember",
        email: "ida@ember.example",
        password: " two words ",
        note: "a\nb",
        agreed: true,
      },
    });
  });

  it("names what is wrong in the given words and gives back the answers without the password", async () => {
    const parsed = await parseForm(
      form([
        ["name", " "],
        ["email", "ida@"],
        ["password", "secret words"],
      ]),
      person,
      { words: { nameMissing: "Wie heißen Sie?", emailWrong: "Das ist keine Adresse." } },
    );
    expect(parsed).toEqual({
      ok: false,
      errors: { name: ["Wie heißen Sie?"], email: ["Das ist keine Adresse."] },
      answers: { name: " ", email: "ida@" },
    });
  });

  it("says in the reader's language that a field is missing", async () => {
    const parsed = await parseForm(form([]), z.object({ size: z.string() }), { language: "de" });
    expect(parsed).toMatchObject({ ok: false, errors: { size: ["Bitte füllen Sie dieses Feld aus."] } });
  });

  it("reads lists and nested names, and reports mistakes under the names as they were sent", async () => {
    const schema = z.object({
      address: z.object({ city: line("city") }),
      steps: z.array(z.object({ amount: wholeNumber("amount", 1, 100) })),
      tags: many(z.string()),
    });
    const good = await parseForm(
      form([
        ["address.city", "Pell"],
        ["steps[0].amount", "5"],
        ["steps[2].amount", "7"],
        ["tags", "fog"],
      ]),
      schema,
    );
    expect(good).toMatchObject({
      ok: true,
      value: { address: { city: "Pell" }, steps: [{ amount: 5 }, { amount: 7 }], tags: ["fog"] },
    });
    const bad = await parseForm(
      form([
        ["address.city", ""],
        ["steps[0].amount", "5"],
        ["steps[2].amount", "many"],
      ]),
      schema,
    );
    expect(bad).toMatchObject({
      ok: false,
      errors: { "address.city": ["city"], "steps[2].amount": ["amount"] },
    });
  });

  it("lets no field name reach a prototype", async () => {
    await parseForm(
      form([
        ["__proto__.polluted", "yes"],
        ["constructor.prototype.polluted", "yes"],
      ]),
      z.object({}),
    );
    expect("polluted" in {}).toBe(false);
  });

  it("refuses a body that is no form, and indices beyond bounds", async () => {
    const request = new Request("http://shop.example/", { method: "POST", body: "{}" });
    await expect(parseForm(request, z.object({}))).rejects.toMatchObject({ code: "bad_request" });
    await expect(parseForm(form([["a[99999]", "1"]]), z.object({}))).rejects.toMatchObject({
      code: "bad_request",
    });
  });

  it("answers with status 400, the mistakes and the answers", async () => {
    const parsed = await parseForm(form([["name", "x"]]), z.object({ name: z.string() }));
    const answer = formProblem(parsed, { name: ["taken"] });
    expect(answer.init?.status).toBe(400);
    expect(answer.data).toEqual({ problem: { errors: { name: ["taken"] }, answers: { name: "x" } } });
  });
});
