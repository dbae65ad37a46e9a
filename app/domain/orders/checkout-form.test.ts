import { describe, expect, it } from "vitest";
import { parseForm } from "~/platform/forms.server";
import { checkoutForm, reckonedFor, wayOf } from "./checkout-form";

const FORMAT = "019360d2-0000-7000-8000-000000000001";

const whole = {
  submissionKey: "k".repeat(24),
  seenFor: "GB",
  "lines[0].formatId": FORMAT,
  "lines[0].seenAmount": "28000",
  email: "maud@post.example",
  name: "Maud Ellery",
  method: "delivery",
  "address.country": "GB",
  "address.line1": "3 Malthouse Row",
  "address.city": "Thorn Lane",
  "address.postcode": "ab12cd",
};

function parse(change: Record<string, string | undefined> = {}) {
  const form = new FormData();
  for (const [name, value] of Object.entries({ ...whole, ...change })) {
    if (value !== undefined) form.append(name, value);
  }
  return parseForm(form, checkoutForm);
}

async function errors(change: Record<string, string | undefined>) {
  const form = await parse(change);
  return form.ok ? {} : form.errors;
}

describe("the checkout's form", () => {
  it("reads the lines with the prices seen, and puts the buyer's name on the parcel", async () => {
    const form = await parse();
    if (!form.ok || form.value.method !== "delivery") throw new Error(JSON.stringify(form));
    expect(form.value.lines).toEqual([{ formatId: FORMAT, seenAmount: 28_000 }]);
    expect(form.value.address).toEqual({
      name: "Maud Ellery",
      line1: "3 Malthouse Row",
      city: "Thorn Lane",
      postcode: "AB1 2CD",
      country: "GB",
    });
  });

  it("takes another name for the parcel where one is given", async () => {
    const form = await parse({ "address.name": "Tobias Wrenfield" });
    expect(form.ok && form.value.method === "delivery" && form.value.address.name).toBe("Tobias Wrenfield");
  });

  it("asks for no more than e-mail and name when the print is collected, whatever the address says", async () => {
    const form = await parse({ method: "collection", "address.line1": "", "address.country": "" });
    expect(form.ok && form.value).toMatchObject({ method: "collection", name: "Maud Ellery" });
    expect(form.ok && "address" in form.value).toBe(false);
  });

  it("says each mistake once, at the field it belongs to", async () => {
    expect(await errors({ name: "", email: "nobody", "address.city": "" })).toEqual({
      name: ["nameMissing"],
      email: ["emailWrong"],
      "address.city": ["address.city.missing"],
    });
    expect(await errors({ "address.postcode": "" })).toEqual({
      "address.postcode": ["address.postcode.missing"],
    });
    expect(await errors({ telephone: "none" })).toEqual({ telephone: ["telephoneWrong"] });
  });

  it("keeps every answer of a form that was not taken", async () => {
    const form = await parse({ email: "nobody", note: "Ring twice" });
    expect(form.ok).toBe(false);
    expect(form.answers).toMatchObject({
      email: "nobody",
      note: "Ring twice",
      submissionKey: "k".repeat(24),
    });
  });

  it("refuses a form without lines, with an amount that is none, or without its key", async () => {
    expect(
      Object.keys(await errors({ "lines[0].formatId": undefined, "lines[0].seenAmount": undefined })),
    ).toEqual(["lines"]);
    expect(Object.keys(await errors({ "lines[0].seenAmount": "-1" }))).toEqual(["lines[0].seenAmount"]);
    expect(await errors({ submissionKey: "short" })).toEqual({ submissionKey: ["keyMissing"] });
  });

  it("names what sums are worked out for", () => {
    expect(reckonedFor(wayOf(null), "NO")).toBe("NO");
    expect(reckonedFor(wayOf("collection"), "NO")).toBe("collection");
    expect(wayOf("by kite")).toBe("delivery");
  });
});
