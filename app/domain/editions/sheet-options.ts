import { OFFERED_SHEETS, type SizeMm } from "~/domain/imaging/sizes";

/** Sheets offered when a format is planned, upright and lying, in whole millimetres, as formats keep them. */
export type SheetOption = SizeMm & { value: string; label: string; family: string };

const FAMILIES = {
  iso_a: "A sheets (ISO 216)",
  iso_b: "B sheets (ISO 216)",
  photographic: "Photographic sheets",
};

export const SHEET_OPTIONS: readonly SheetOption[] = OFFERED_SHEETS.flatMap((sheet) => {
  const [short, long] = [Math.round(sheet.widthMm), Math.round(sheet.heightMm)];
  const option = (word: "upright" | "lying", widthMm: number, heightMm: number): SheetOption => ({
    value: `${sheet.name} ${word}`,
    label: `${sheet.name} ${word}, ${widthMm} × ${heightMm} mm`,
    family: FAMILIES[sheet.family],
    widthMm,
    heightMm,
  });
  return [option("upright", short, long), option("lying", long, short)];
});

/** The offered sheets by family, for a select. */
export const SHEET_GROUPS = Object.values(FAMILIES).map((label) => ({
  label,
  options: SHEET_OPTIONS.filter((option) => option.family === label).map(({ value, label: name }) => ({
    value,
    label: name,
  })),
}));

export function sheetOption(value: string): SheetOption | null {
  return SHEET_OPTIONS.find((option) => option.value === value) ?? null;
}

/** The offered sheet of a size, or null where the size has no name here. */
export function sheetOptionOf(size: SizeMm): SheetOption | null {
  return (
    SHEET_OPTIONS.find((option) => option.widthMm === size.widthMm && option.heightMm === size.heightMm) ??
    null
  );
}
