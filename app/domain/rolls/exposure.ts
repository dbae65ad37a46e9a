/** How exposures are written down: apertures as f-numbers, times in seconds, both as a photographer writes them. */

/** An f-number from "22", "f/22", "f22" or "5,6"; null for anything else. 0.5 to 1000, as pinholes go to several hundred. */
export function parseAperture(text: string): number | null {
  const match = /^f?\s*\/?\s*(\d{1,4}(?:[.,]\d{1,2})?)$/i.exec(text.trim());
  if (match === null) return null;
  const value = Number(match[1]?.replace(",", "."));
  return value >= 0.5 && value <= 1000 ? value : null;
}

/** "f/22" */
export function formatAperture(aperture: number): string {
  return `f/${aperture}`;
}

const LONGEST_SECONDS = 7 * 24 * 3600;

/**
 * A time in seconds from "1/125", "6", "6 s", "0.5", "1:30" (minutes and seconds), "4 min", "2 h", "1 min 30 s"; null
 * for anything else. More than nothing, at most a week.
 */
export function parseSeconds(text: string): number | null {
  const clean = text.trim().toLowerCase().replaceAll(",", ".");
  const seconds = fraction(clean) ?? clock(clean) ?? units(clean);
  return seconds !== null && seconds > 0 && seconds <= LONGEST_SECONDS ? seconds : null;
}

function fraction(text: string): number | null {
  const match = /^(\d{1,3})\s*\/\s*(\d{1,5})\s*s?$/.exec(text);
  return match === null || Number(match[2]) === 0 ? null : Number(match[1]) / Number(match[2]);
}

function clock(text: string): number | null {
  const match = /^(\d{1,4}):([0-5]\d)$/.exec(text);
  return match === null ? null : Number(match[1]) * 60 + Number(match[2]);
}

function units(text: string): number | null {
  const number = "\\d{1,6}(?:\\.\\d{1,3})?";
  const match = new RegExp(
    `^(?:(${number})\\s*h)?\\s*(?:(${number})\\s*m(?:in)?)?\\s*(?:(${number})\\s*(?:s|sec)?)?$`,
  ).exec(text);
  if (match === null || text === "") return null;
  const [, hours = "0", minutes = "0", seconds = "0"] = match;
  return Number(hours) * 3600 + Number(minutes) * 60 + Number(seconds);
}

/** "1/125 s", "6 s", "1 min 30 s", "2 h": read back by `parseSeconds` as the same time. */
export function formatSeconds(seconds: number): string {
  if (seconds < 1) {
    const below = 1 / seconds;
    if (Math.abs(below - Math.round(below)) < 1e-6 * below) return `1/${Math.round(below)} s`;
    return `${trimmed(seconds)} s`;
  }
  if (seconds < 60) return `${trimmed(seconds)} s`;
  const hours = Math.floor(seconds / 3600);
  const minutes = Math.floor((seconds - hours * 3600) / 60);
  const rest = seconds - hours * 3600 - minutes * 60;
  const parts = [
    hours > 0 ? `${hours} h` : "",
    minutes > 0 ? `${minutes} min` : "",
    rest > 0 ? `${trimmed(rest)} s` : "",
  ];
  return parts.filter((part) => part !== "").join(" ");
}

function trimmed(value: number): string {
  return String(Number(value.toFixed(3)));
}
