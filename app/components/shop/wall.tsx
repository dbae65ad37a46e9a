import { useId } from "react";
import { layOutWall, type WallLayout, type WallSheet } from "~/components/shop/wall-layout";

export type WallPiece = Omit<WallSheet, "letters"> & {
  key: string;
  /** One proof of the picture, about 600 px wide. */
  image: string;
  /** "12/15"; the number one would get. */
  number?: string;
  /** "smooth matt" */
  name: string;
  /** "420 × 360 mm" */
  size: string;
};

export type WallProps = {
  title: string;
  text: string;
  /** The drawing in words: "The three sheets to scale beside a chair: …" */
  label: string;
  pieces: readonly WallPiece[];
  /** Language of the measure along the floor, as in `<html lang>`. */
  language: string;
};

/** Above this height of a sheet, mm, the words no longer fit under the prints. */
const roomyBelow = 1000;

/** The sheets of a picture hung side by side, to scale, with a chair to judge them by. */
export function Wall({ title, text, label, pieces, language }: WallProps) {
  const id = useId();
  const wide = layOutWall(withWords(pieces, "wide"), "wide");
  const narrow = layOutWall(withWords(pieces, "narrow"), "narrow");
  const roomy = wide.width === 3800 && pieces.every((piece) => piece.sheet.height <= roomyBelow);
  return (
    <section className="wall" aria-labelledby={id}>
      <div className={roomy ? "wall-text wall-roomy" : "wall-text"}>
        <h2 id={id}>{title}</h2>
        <p className="quiet">{text}</p>
      </div>
      <div className="wall-in" role="img" aria-label={label}>
        <Drawing layout={wide} pieces={pieces} language={language} view="wide" />
        <Drawing layout={narrow} pieces={pieces} language={language} view="narrow" />
      </div>
    </section>
  );
}

type View = "wide" | "narrow";

/** The two lines under a sheet; on a narrow wall there is no room for the paper beside the number. */
function linesOf({ number, name, size }: WallPiece, view: View) {
  return { number, name: number && view === "narrow" ? "" : name, size };
}

function withWords(pieces: readonly WallPiece[], view: View): WallSheet[] {
  return pieces.map((piece) => {
    const { number = "", name, size } = linesOf(piece, view);
    return { ...piece, letters: Math.max(number.length + 1 + name.length, size.length) };
  });
}

type DrawingProps = {
  layout: WallLayout;
  pieces: readonly WallPiece[];
  language: string;
  view: View;
};

/**
 * An empty drawing gives the box its proportions; the one over it is drawn in shares of it, so that
 * its words keep their size on any page.
 */
function Drawing({ layout, pieces, language, view }: DrawingProps) {
  const { width, height, floor, chair } = layout;
  const across = (mm: number) => `${(mm / width) * 100}%`;
  const down = (mm: number) => `${((height - mm) / height) * 100}%`;
  const high = (mm: number) => `${(mm / height) * 100}%`;
  const metre = new Intl.NumberFormat(language, { style: "unit", unit: "meter", maximumFractionDigits: 1 });
  const marks = Array.from({ length: Math.ceil(width / 500) }, (_, at) => at * 500).filter(
    (mark) => mark < width - 250,
  );
  return (
    <div className={`wall-${view}`}>
      <svg className="wall-size" viewBox={`0 0 ${width} ${height}`} aria-hidden="true" focusable="false" />
      <svg className="wall-drawing" aria-hidden="true" focusable="false">
        <rect className="wall-floor" x="0" y={down(floor)} width="100%" height={high(floor)} />
        <line className="wall-skirting" x1="0" x2="100%" y1={down(floor)} y2={down(floor)} />
        {pieces.map((piece, at) => {
          const place = layout.places[at];
          if (!place) return null;
          const { x, bottom } = place;
          const lines = linesOf(piece, view);
          const top = bottom + piece.sheet.height;
          const frame = 16;
          const imageLeft = x + (piece.sheet.width - piece.picture.width) / 2;
          const imageTop = top - (piece.sheet.height - piece.picture.height) * 0.46;
          return (
            <g key={piece.key}>
              <rect
                className="hung-shade"
                x={across(x - 4)}
                y={down(top - 22)}
                width={across(piece.sheet.width + 8)}
                height={high(piece.sheet.height)}
              />
              <rect
                className="hung-frame"
                x={across(x)}
                y={down(top)}
                width={across(piece.sheet.width)}
                height={high(piece.sheet.height)}
              />
              <rect
                className="hung-paper"
                x={across(x + frame)}
                y={down(top - frame)}
                width={across(piece.sheet.width - 2 * frame)}
                height={high(piece.sheet.height - 2 * frame)}
              />
              <image
                href={piece.image}
                x={across(imageLeft)}
                y={down(imageTop)}
                width={across(piece.picture.width)}
                height={high(piece.picture.height)}
                preserveAspectRatio="xMidYMid slice"
              />
              <text className="wall-words" x={across(x)} y={down(bottom)} dy="20">
                {lines.number ? <tspan className="hung-no">{lines.number} </tspan> : null}
                {lines.name}
              </text>
              <text className="wall-words" x={across(x)} y={down(bottom)} dy="36">
                {lines.size}
              </text>
            </g>
          );
        })}
        <svg
          className="chair"
          x={across(chair.x)}
          y={down(chair.bottom + chair.height)}
          width={across(chair.width)}
          height={high(chair.height)}
          viewBox="0 0 560 880"
          aria-hidden="true"
        >
          <path d="M92 872L118 452M118 452L84 18M196 872L206 470M436 872L418 470M520 872L478 448" />
          <path d="M84 18C96 8 114 8 124 18L152 446M92 96L128 90M98 168L132 162M104 242L138 236M112 316L142 310" />
          <path className="chair-seat" d="M104 452L480 436L500 470L122 488Z" />
          <path d="M196 700L430 690M104 690L196 700" />
        </svg>
        {marks.map((mark) => (
          <g key={mark}>
            <line className="wall-tick" x1={across(mark)} x2={across(mark)} y1={down(70)} y2={down(20)} />
            <text className="wall-words" x={across(mark)} y={down(20)} dx="4">
              {mark === 0 ? "0" : metre.format(mark / 1000)}
            </text>
          </g>
        ))}
      </svg>
    </div>
  );
}
