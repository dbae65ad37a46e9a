import {
  type Margins,
  margins,
  type ResolutionWord,
  resolutionAt,
  type SizeMm,
  sheetMassGrams,
  viewingDistanceMm,
} from "~/domain/imaging/sizes";
import { checkLadder, type PriceStep, sellOutTotal } from "~/domain/pricing/ladder";
import { type CapCount, type CountedEdition, countAgainstCap } from "./cap";
import { proofShare } from "./numbering";
import { sheetOptionOf } from "./sheet-options";

/** What a planned edition comes to, shown beside its form while it is filled in. The same on the server and in a test. */

/** A plan as far as it goes: what is not known yet is null. */
export type EditionPlan = {
  limit: number | null;
  ap: number;
  pp: number;
  hc: number;
  bat: number;
  exhibition: number;
  formats: {
    sheet: SizeMm | null;
    image: SizeMm | null;
    /** g/m² of the paper. */
    grammage: number | null;
    steps: PriceStep[];
  }[];
};

/** A picture of the print: the pixels inside its crop, and every other edition it is in. */
export type PlannedPicture = { widthPx: number; heightPx: number; otherEditions: CountedEdition[] };

export type FormatFigures = {
  resolution: { ppi: number; word: ResolutionWord } | null;
  /** From where the image is looked at, mm. */
  distance: { nearest: number; furthest: number } | null;
  margins: Margins | null;
  /** Whether the image lies within its sheet. */
  fits: boolean;
  /** What the sheet is called: "A3 upright". */
  sheetName: string | null;
  /** One sheet, grams. */
  grams: number | null;
  /** The height this width asks for by the picture's shape, mm; null while the image has the picture's shape. */
  heightForWidth: number | null;
  /** What keeps the ladder from giving every number one price. */
  ladderProblems: string[];
  /** What the numbered run brings at the ladder's prices, minor units; null while the ladder is not whole. */
  sellOut: number | null;
};

export type EditionFigures = {
  /** A tenth of the limit, cut down and rounded up. */
  proofsUsual: { floor: number; ceil: number } | null;
  /** Sheets of paper that one copy is made of. */
  sheetsACopy: number;
  /** Copies of this edition alone, proofs counted. */
  copies: number | null;
  /** Of the picture with most copies; null while the limit is not known. */
  cap: CapCount | null;
  formats: FormatFigures[];
};

/** Works out everything the plan allows to be known. */
export function editionFigures(plan: EditionPlan, pictures: readonly PlannedPicture[]): EditionFigures {
  const limit = plan.limit !== null && plan.limit >= 1 && plan.limit <= 10_000 ? plan.limit : null;
  const own: CountedEdition | null =
    limit === null
      ? null
      : {
          limit,
          ap: plan.ap,
          pp: plan.pp,
          hc: plan.hc,
          bat: plan.bat,
          exhibition: plan.exhibition,
          status: "draft",
        };
  const counts =
    own === null ? [] : pictures.map((picture) => countAgainstCap([...picture.otherEditions, own]));
  return {
    proofsUsual: limit === null ? null : proofShare(limit),
    sheetsACopy: pictures.length,
    copies: own === null ? null : countAgainstCap([own]).total,
    cap: counts.reduce<CapCount | null>(
      (most, one) => (most === null || one.total > most.total ? one : most),
      null,
    ),
    formats: plan.formats.map((format) => formatFigures(format, pictures, limit)),
  };
}

function formatFigures(
  { sheet, image, grammage, steps }: EditionPlan["formats"][number],
  pictures: readonly PlannedPicture[],
  limit: number | null,
): FormatFigures {
  const resolutions = image === null ? [] : pictures.map((picture) => resolutionAt(picture, image));
  const ladderProblems = limit === null ? [] : checkLadder(steps, limit).map((problem) => problem.sentence);
  const shape = pictures[0];
  // Sizes are whole millimetres: half of one is lost to rounding on either side.
  const wanted =
    image === null || shape === undefined ? null : (image.widthMm * shape.heightPx) / shape.widthPx;
  const slack = shape === undefined ? 1 : 0.5 + (0.5 * shape.heightPx) / shape.widthPx + 0.05;
  const within = image !== null && sheet !== null;
  return {
    resolution: resolutions.reduce<FormatFigures["resolution"]>(
      (lowest, one) => (lowest === null || one.ppi < lowest.ppi ? one : lowest),
      null,
    ),
    distance: image === null ? null : viewingDistanceMm(image),
    margins: within ? margins(image, sheet) : null,
    fits: !within || (image.widthMm <= sheet.widthMm && image.heightMm <= sheet.heightMm),
    sheetName: sheet === null ? null : (sheetOptionOf(sheet)?.value ?? null),
    grams:
      sheet === null || grammage === null ? null : sheetMassGrams(sheet.widthMm, sheet.heightMm, grammage),
    heightForWidth:
      wanted === null || image === null || Math.abs(wanted - image.heightMm) <= slack
        ? null
        : Math.round(wanted),
    ladderProblems,
    sellOut: limit !== null && ladderProblems.length === 0 ? sellOutTotal(steps) : null,
  };
}
