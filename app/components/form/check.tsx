import type { ComponentProps } from "react";
import { ariaFor, type FieldWords, firstError, Wrong } from "~/components/form/field-frame";

export type CheckProps = FieldWords &
  Omit<ComponentProps<"input">, "id" | "className" | "type"> & { name: string };

/** Something that is so or is not. */
export function Check({ id: givenId, label, hint, error, span, name, ...input }: CheckProps) {
  const id = givenId ?? name;
  const wrong = firstError(error);
  return (
    <div className={span ? "check span" : "check"} data-wrong={wrong ? "" : undefined}>
      {wrong ? <Wrong id={`${id}-wrong`}>{wrong}</Wrong> : null}
      <label htmlFor={id}>
        <input {...input} {...ariaFor(id, { hint, error })} type="checkbox" id={id} name={name} />
        <span>{label}</span>
      </label>
      {hint ? (
        <span className="hint" id={`${id}-hint`}>
          {hint}
        </span>
      ) : null}
    </div>
  );
}
