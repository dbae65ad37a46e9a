/** Where a frame's scan stands, in words, and what can be done about it. */

export type ScanStanding = {
  state: "expected" | "checking" | "ready" | "refused";
  refusedReason: string | null;
  proofState: "waiting" | "working" | "ready" | "failed";
  proofFailure: string | null;
};

export type FrameStanding = {
  state: "queued" | "checking" | "working" | "ready" | "refused";
  /** In the frame's window while there is no picture. */
  says: string;
  /** A short line. */
  words: string;
  /** A sentence where there is more to be said: the reason of a refusal, what failed. */
  more: string | null;
  /** It was announced and has not arrived. */
  awaited: boolean;
  /** Somebody has to look at it. */
  needsLook: boolean;
  /** The worker is or will be at it: the page looks again by itself. */
  pending: boolean;
  /** A press can have it tried again. */
  canRetry: boolean;
};

const quiet = { more: null, awaited: false, needsLook: false, pending: false, canRetry: false };

/** What the newest scan of a frame comes to; null where it has none. */
export function frameStanding(scan: ScanStanding | null): FrameStanding {
  if (scan === null) return { ...quiet, state: "queued", says: "empty", words: "No scan" };
  switch (scan.state) {
    case "expected":
      return {
        ...quiet,
        state: "queued",
        awaited: true,
        says: "not here",
        words: "Has not arrived",
        more: "Choose its file again to send it.",
      };
    case "refused":
      return {
        ...quiet,
        state: "refused",
        says: "Refused",
        words: "Refused",
        more: scan.refusedReason,
        needsLook: true,
      };
    case "checking":
      return scan.proofState === "failed"
        ? failed("could not be checked", "The file could not be checked", scan.proofFailure)
        : {
            ...quiet,
            state: "checking",
            says: "is being checked",
            words: "Arrived, being checked",
            pending: true,
          };
    case "ready":
      return proofStanding(scan);
  }
}

function proofStanding(scan: ScanStanding): FrameStanding {
  switch (scan.proofState) {
    case "waiting":
      return {
        ...quiet,
        state: "working",
        says: "proof waits",
        words: "Checked, its proof waits its turn",
        more: scan.proofFailure === null ? null : `${scan.proofFailure} It is tried again.`,
        pending: true,
      };
    case "working":
      return {
        ...quiet,
        state: "working",
        says: "proof comes",
        words: "Checked, its proof is being built",
        pending: true,
      };
    case "failed":
      return failed("no proof", "Its proof could not be built", scan.proofFailure);
    case "ready":
      return { ...quiet, state: "ready", says: "", words: "In, checked" };
  }
}

function failed(says: string, words: string, failure: string | null): FrameStanding {
  return { ...quiet, state: "refused", says, words, more: failure, needsLook: true, canRetry: true };
}

const figures = new Intl.NumberFormat("en-GB");
const oneDecimal = new Intl.NumberFormat("en-GB", { minimumFractionDigits: 1, maximumFractionDigits: 1 });

/** "238 MB", "1.4 GB", "8 kB": decimal units, as disks are sold. */
export function byteWords(bytes: number): string {
  if (bytes >= 1e9) return `${oneDecimal.format(bytes / 1e9)} GB`;
  if (bytes >= 1e6) return `${figures.format(Math.round(bytes / 1e6))} MB`;
  return `${figures.format(Math.ceil(bytes / 1e3))} kB`;
}

export type PixelFacts = {
  width: number | null;
  height: number | null;
  bitDepth: number | null;
  channels: number | null;
};

/** "7,000 × 5,600, 16-bit grey"; "" before the file has been read. */
export function pixelWords({ width, height, bitDepth, channels }: PixelFacts): string {
  if (width === null || height === null) return "";
  const kind = bitDepth === null ? "" : `, ${bitDepth}-bit ${channels === 1 ? "grey" : "colour"}`;
  return `${figures.format(width)} × ${figures.format(height)}${kind}`;
}
