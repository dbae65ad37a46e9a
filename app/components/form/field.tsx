import type { ComponentProps } from "react";
import { ariaFor, FieldFrame, type FieldWords } from "~/components/form/field-frame";

export type FieldProps = FieldWords &
  Omit<ComponentProps<"input">, "id" | "className"> & {
    name: string;
    /** Written after the box, inside its edge: "mm", "%". */
    unit?: string;
    /** The box is only as wide as the answer. */
    width?: "short" | "middle" | "full";
  };

/** One line to fill in. */
export function Field({
  id: givenId,
  label,
  hint,
  error,
  span,
  unit,
  width = "full",
  name,
  ...input
}: FieldProps) {
  const id = givenId ?? name;
  const box = (
    <input
      type="text"
      {...input}
      {...ariaFor(id, { hint, error })}
      id={id}
      name={name}
      className={width === "full" ? "input" : `input input-${width}`}
    />
  );
  return (
    <FieldFrame id={id} label={label} hint={hint} error={error} span={span}>
      {unit ? (
        <span className="with-unit">
          {box} <span className="unit">{unit}</span>
        </span>
      ) : (
        box
      )}
    </FieldFrame>
  );
}

export type TextAreaProps = FieldWords &
  Omit<ComponentProps<"textarea">, "id" | "className"> & { name: string };

/** Several lines to fill in. */
export function TextArea({ id: givenId, label, hint, error, span, name, rows = 4, ...area }: TextAreaProps) {
  const id = givenId ?? name;
  return (
    <FieldFrame id={id} label={label} hint={hint} error={error} span={span}>
      <textarea
        {...area}
        {...ariaFor(id, { hint, error })}
        id={id}
        name={name}
        rows={rows}
        className="input"
      />
    </FieldFrame>
  );
}
