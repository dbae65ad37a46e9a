import { describe, expect, it } from "vitest";
import { parseForm } from "~/platform/forms.server";
import { answersOf, editionForm, FIRST_ANSWERS, planOf } from "./edition-form";
import { actOnRows, actOnSteps, rowsOf, TWICE } from "./edition-rows";

const PAPER = "0190a000-0000-7000-8000-000000000001";
const studio = { currency: "GBP" as const, zone: "Europe/London" };

const filled: Record<string, string> = {
  id: "0190a000-0000-7000-8000-000000000002",
  printId: "0190a000-0000-7000-8000-000000000003",
  limit: "25",
  artistsProofs: "2",
  printersProofs: "",
  horsCommerce: "0",
  exhibitionCopies: "1",
  bonATirer: "on",
  "formats[0].paperId": PAPER,
  "formats[0].process": "pigment print",
  "formats[0].sheet": "A3 lying",
  "formats[0].sheetWidth": "1",
  "formats[0].sheetHeight": "1",
  "formats[0].imageWidth": "350",
  "formats[0].imageHeight": "280",
  "formats[0].steps[0].from": "1",
  "formats[0].steps[0].to": "24",
  "formats[0].steps[0].price": "£280",
  "formats[0].steps[1].from": "25",
  "formats[0].steps[1].to": "",
  "formats[0].steps[1].price": "1,200.50",
  "formats[0].steps[2].from": "",
  "formats[0].steps[2].to": "",
  "formats[0].steps[2].price": "",
  release: "now",
  furtherEditions: "None in this size.",
  returnedNumber: "in_hand",
  returnedPrice: "next",
};

function parse(changes: Record<string, string> = {}) {
  const form = new FormData();
  for (const [name, value] of Object.entries({ ...filled, ...changes })) form.append(name, value);
  return parseForm(form, editionForm(studio));
}

async function errorsOf(changes: Record<string, string>) {
  const form = await parse(changes);
  return form.ok ? {} : form.errors;
}

describe("the plan of an edition", () => {
  it("is read into numbers: a chosen sheet wins over typed sizes, empty rows are left out", async () => {
    const form = await parse();
    expect(form.ok && form.value.draft).toEqual({
      limit: 25,
      artistsProofs: 2,
      printersProofs: 0,
      horsCommerce: 0,
      bonATirer: 1,
      exhibitionCopies: 1,
      releaseAt: null,
      furtherEditions: "None in this size.",
      returnedNumber: "in_hand",
      returnedPrice: "next",
      formats: [
        {
          paperId: PAPER,
          process: "pigment print",
          imageWidthMm: 350,
          imageHeightMm: 280,
          sheetWidthMm: 420,
          sheetHeightMm: 297,
          steps: [
            { fromNumber: 1, toNumber: 24, amount: 28_000 },
            { fromNumber: 25, toNumber: 25, amount: 120_050 },
          ],
        },
      ],
    });
  });

  it("comes back into the form as it was", async () => {
    const form = await parse({ release: "at", releaseDay: "2026-12-11", releaseTime: "18:00" });
    if (!form.ok) throw new Error(JSON.stringify(form.errors));
    const answers = answersOf(form.value.draft, studio);
    expect(answers).toMatchObject({
      releaseDay: "2026-12-11",
      releaseTime: "18:00",
      bonATirer: "on",
      "formats[0].sheet": "A3 lying",
      "formats[0].steps[1].price": "1200.50",
    });
    const again = new FormData();
    for (const [name, value] of Object.entries({ ...answers, id: filled.id, printId: filled.printId })) {
      if (typeof value === "string") again.append(name, value);
    }
    const second = await parseForm(again, editionForm(studio));
    expect(second.ok && second.value.draft).toEqual(form.value.draft);
  });

  it("says what is wrong beside its field", async () => {
    expect(await errorsOf({ limit: "0" })).toHaveProperty("limit");
    expect(await errorsOf({ "formats[0].paperId": "" })).toEqual({
      "formats[0].paperId": ["Choose a paper."],
    });
    expect(await errorsOf({ "formats[0].imageWidth": "421" })).toEqual({
      "formats[0].imageWidth": ["The image is wider than its sheet of 420 mm."],
    });
    expect(await errorsOf({ "formats[0].steps[0].price": "280.505" })).toHaveProperty([
      "formats[0].steps[0].price",
    ]);
    expect(await errorsOf({ "formats[0].steps[0].price": "0" })).toEqual({
      "formats[0].steps[0].price": ["A price is more than nothing."],
    });
    expect(await errorsOf({ "formats[0].steps[1].to": "26" })).toHaveProperty(["formats[0].steps[1].to"]);
    expect(await errorsOf({ "formats[0].sheet": "", "formats[0].sheetWidth": "" })).toHaveProperty([
      "formats[0].sheetWidth",
    ]);
  });

  it("asks which is meant when the clocks show the release twice, and refuses a time they leave out", async () => {
    const twice = { release: "at", releaseDay: "2026-10-25", releaseTime: "01:30" };
    expect(await errorsOf(twice)).toEqual({ releaseTime: [TWICE] });
    const second = await parse({ ...twice, releaseWhich: "second" });
    expect(second.ok && second.value.draft.releaseAt).toEqual(new Date("2026-10-25T01:30:00Z"));
    const gap = await errorsOf({ release: "at", releaseDay: "2026-03-29", releaseTime: "01:30" });
    expect(gap.releaseTime?.[0]).toMatch(/There is no 01:30 on that day in Europe\/London/);
    expect(await errorsOf({ release: "at", releaseDay: "", releaseTime: "18:00" })).toHaveProperty(
      "releaseDay",
    );
  });

  it("gives the figures what is known of it so far", () => {
    const plan = planOf(
      { ...filled, limit: "", "formats[0].steps[1].price": "dear" },
      { currency: "GBP", grammages: new Map([[PAPER, 310]]) },
    );
    expect(plan).toEqual({
      limit: null,
      ap: 2,
      pp: 0,
      hc: 0,
      bat: 1,
      exhibition: 1,
      formats: [
        {
          sheet: expect.objectContaining({ widthMm: 420, heightMm: 297 }),
          image: { widthMm: 350, heightMm: 280 },
          grammage: 310,
          steps: [{ fromNumber: 1, toNumber: 24, amount: 28_000 }],
        },
      ],
    });
  });
});

describe("rows of the form", () => {
  const ratio = { width: 5, height: 4 };

  it("are added where the last one ends, and taken away; the rest stays as typed", () => {
    const added = actOnRows("add-step:0", FIRST_ANSWERS, ratio);
    expect(added?.focus).toBe("formats[0].steps[1].to");
    expect(rowsOf(added?.answers ?? {}).formats[0]?.steps).toEqual([
      { from: "1", to: "25", price: "" },
      { from: "26", to: "", price: "" },
    ]);
    const removed = actOnRows("remove-step:0:0", added?.answers ?? {}, ratio);
    expect(rowsOf(removed?.answers ?? {}).formats[0]?.steps).toEqual([{ from: "26", to: "", price: "" }]);
    expect(removed?.answers.limit).toBe("25");
  });

  it("can be formats, the last of which stays", () => {
    const two = actOnRows("add-format", FIRST_ANSWERS, ratio);
    expect(rowsOf(two?.answers ?? {}).formats).toHaveLength(2);
    const one = actOnRows("remove-format:0", two?.answers ?? {}, ratio);
    expect(rowsOf(one?.answers ?? {}).formats).toHaveLength(1);
    expect(
      rowsOf(actOnRows("remove-format:0", one?.answers ?? {}, ratio)?.answers ?? {}).formats,
    ).toHaveLength(1);
  });

  it("fit the picture into its sheet in whole millimetres", () => {
    const answers = { ...FIRST_ANSWERS, "formats[0].sheet": "A3 lying", "formats[0].margin": "30" };
    const fit = actOnRows("fit:0", answers, ratio);
    // 420 x 297 mm less 30 mm on every side leaves 360 x 237; 5:4 fills the height: 296.25 x 237.
    expect(rowsOf(fit?.answers ?? {}).formats[0]).toMatchObject({ imageWidth: "296", imageHeight: "237" });
    const unknown = actOnRows("fit:0", FIRST_ANSWERS, ratio);
    expect(unknown?.said).toMatch(/Give a sheet/);
    expect(actOnRows("save", answers, ratio)).toBeNull();
  });

  it("stand by themselves when prices change", () => {
    const one = { "steps[0].from": "1", "steps[0].to": "3", "steps[0].price": "280", intent: "add-step" };
    const two = actOnSteps("add-step", one);
    expect(two).toMatchObject({
      focus: "steps[1].to",
      answers: { "steps[1].from": "4", intent: "add-step" },
    });
    expect(actOnSteps("remove-step:0", two?.answers ?? {})?.answers).toMatchObject({ "steps[0].from": "4" });
    expect(actOnSteps("prices", one)).toBeNull();
  });
});
