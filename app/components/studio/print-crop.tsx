import { type PointerEvent, useRef, useState } from "react";
import { Field } from "~/components/form/field";
import type { FormState } from "~/components/form/form-state";
import type { PictureProps } from "~/components/ui/picture";
import type { Crop } from "~/domain/imaging/proof-sizes";
import { cropBetween, cropProblem, parsePerCent, perCent } from "~/domain/prints/crop";

export type PrintCropProps = {
  form: FormState;
  /** Ids of the fields begin with it. */
  prefix: string;
  /** The whole frame. */
  picture: PictureProps;
  scan: { width: number; height: number };
  /** An edition was opened: the crop stays. */
  fixed: boolean;
};

type Sides = { cropX: string; cropY: string; cropWidth: string; cropHeight: string };

const NAMES: { name: keyof Sides; label: string }[] = [
  { name: "cropX", label: "From the left" },
  { name: "cropY", label: "From the top" },
  { name: "cropWidth", label: "Width" },
  { name: "cropHeight", label: "Height" },
];

function cropOf(sides: Sides): Crop | null {
  const [x, y, width, height] = [sides.cropX, sides.cropY, sides.cropWidth, sides.cropHeight].map(
    parsePerCent,
  );
  if (x == null || y == null || width == null || height == null) return null;
  const crop = { x, y, width, height };
  return cropProblem(crop) === null ? crop : null;
}

/** The names under which a crop is sent. */
export function cropAnswers(crop: Crop): Sides {
  return {
    cropX: perCent(crop.x),
    cropY: perCent(crop.y),
    cropWidth: perCent(crop.width),
    cropHeight: perCent(crop.height),
  };
}

/** The scan with its crop drawn on it, and the four numbers it rests on. With script it can be drawn by hand, too. */
export function PrintCrop({ form, prefix, picture, scan, fixed }: PrintCropProps) {
  const first = Object.fromEntries(NAMES.map(({ name }) => [name, form.value(name) ?? ""])) as Sides;
  const [sides, setSides] = useState(first);
  const crop = cropOf(sides);
  const drawing = useRef<SVGSVGElement>(null);
  const from = useRef<{ x: number; y: number } | null>(null);
  const high = Math.round((scan.height / scan.width) * 1000);
  const jpeg = picture.proofs.filter((proof) => proof.format === "jpeg").sort((a, b) => a.width - b.width);
  const image = jpeg.find((proof) => proof.width >= 640) ?? jpeg.at(-1) ?? picture.proofs.at(-1);

  function point(event: PointerEvent) {
    const box = drawing.current?.getBoundingClientRect();
    if (!box || box.width === 0) return null;
    return {
      x: ((event.clientX - box.left) / box.width) * 1_000_000,
      y: ((event.clientY - box.top) / box.height) * 1_000_000,
    };
  }
  function draw(event: PointerEvent) {
    const to = point(event);
    if (from.current === null || to === null) return;
    // A touch that hardly moves is no crop.
    if (Math.abs(to.x - from.current.x) < 20_000 || Math.abs(to.y - from.current.y) < 20_000) return;
    setSides(cropAnswers(cropBetween(from.current, to)));
  }

  return (
    <div className="crop">
      <svg
        ref={drawing}
        className={fixed ? "crop-sheet" : "crop-sheet crop-free"}
        viewBox={`0 0 1000 ${high}`}
        role="img"
        aria-label={
          crop === null
            ? "The scan; the numbers beside it are no crop"
            : `The scan with its crop: ${Math.round((crop.width * scan.width) / 1_000_000)} by ${Math.round((crop.height * scan.height) / 1_000_000)} pixels`
        }
        onPointerDown={(event) => {
          if (fixed) return;
          from.current = point(event);
          event.currentTarget.setPointerCapture(event.pointerId);
        }}
        onPointerMove={draw}
        onPointerUp={(event) => {
          draw(event);
          from.current = null;
        }}
      >
        {image ? (
          <image href={image.url} width="1000" height={high} preserveAspectRatio="none" />
        ) : (
          <path className="crop-none" d={`M0 0L1000 ${high}M1000 0L0 ${high}`} />
        )}
        {crop === null ? null : (
          <>
            <path
              className="crop-off"
              fillRule="evenodd"
              d={`M0 0H1000V${high}H0Z M${crop.x / 1000} ${(crop.y / 1_000_000) * high}h${crop.width / 1000}v${(crop.height / 1_000_000) * high}h${-crop.width / 1000}Z`}
            />
            <rect
              className="crop-edge"
              x={crop.x / 1000}
              y={(crop.y / 1_000_000) * high}
              width={crop.width / 1000}
              height={(crop.height / 1_000_000) * high}
            />
          </>
        )}
      </svg>
      <fieldset className="fieldset crop-numbers">
        <legend className="vh">Crop</legend>
        <div className="fields fields-2">
          {NAMES.map(({ name, label }) => (
            <Field
              key={name}
              id={`${prefix}-${name}`}
              name={name}
              label={label}
              unit="%"
              width="short"
              inputMode="decimal"
              error={form.error(name)}
              value={sides[name]}
              onChange={(event) => setSides({ ...sides, [name]: event.currentTarget.value })}
              disabled={fixed}
            />
          ))}
        </div>
        <p className="hint">
          {crop === null
            ? "These four numbers are no crop of the scan"
            : `${Math.round((crop.width * scan.width) / 1_000_000).toLocaleString("en-GB")} × ${Math.round((crop.height * scan.height) / 1_000_000).toLocaleString("en-GB")} px of ${scan.width.toLocaleString("en-GB")} × ${scan.height.toLocaleString("en-GB")}`}
          .{fixed ? null : " The scan itself is never touched."}
        </p>
      </fieldset>
    </div>
  );
}
