import type { ComponentProps, ReactNode } from "react";
import { ariaFor, firstError, Wrong } from "~/components/form/field-frame";

export type Choice = {
  value: string;
  name: ReactNode;
  /** Under the name. */
  more?: ReactNode;
  /** At the right: a price, or "£18.00". */
  price?: string;
  disabled?: boolean;
};

export type ChoicesProps = {
  name: string;
  /** The first choice's id; the name when left out. The summary leads to it. */
  id?: string;
  legend: ReactNode;
  legendHidden?: boolean;
  hint?: ReactNode;
  error?: string | string[];
  options: readonly Choice[];
  defaultValue?: string;
  required?: boolean;
  /** `title` sets prices as those of numbers, `figures` as sums. */
  prices?: "title" | "figures";
  onChange?: ComponentProps<"input">["onChange"];
};

/** One of a few: full-width rows, the taken one marked by its dot, a bar and a ground. */
export function Choices({
  name,
  id = name,
  legend,
  legendHidden,
  hint,
  error,
  options,
  defaultValue,
  required,
  prices = "figures",
  onChange,
}: ChoicesProps) {
  const wrong = firstError(error);
  const described = ariaFor(id, { hint, error });
  return (
    <fieldset
      className="choices"
      data-wrong={wrong ? "" : undefined}
      aria-describedby={described["aria-describedby"]}
    >
      <legend className={legendHidden ? "vh" : undefined}>{legend}</legend>
      {hint ? (
        <p className="hint" id={`${id}-hint`}>
          {hint}
        </p>
      ) : null}
      {wrong ? <Wrong id={`${id}-wrong`}>{wrong}</Wrong> : null}
      <div className="choice-rows">
        {options.map((option, at) => (
          <label className="choice" key={option.value}>
            <input
              type="radio"
              id={at === 0 ? id : `${id}-${option.value}`}
              name={name}
              value={option.value}
              defaultChecked={option.value === defaultValue}
              disabled={option.disabled}
              required={required}
              aria-invalid={described["aria-invalid"]}
              onChange={onChange}
            />
            <span className="name">{option.name}</span>{" "}
            {option.price ? (
              <span className={prices === "title" ? "price" : "price-s"}>{option.price}</span>
            ) : null}
            {option.more ? <span className="more">{option.more}</span> : null}
          </label>
        ))}
      </div>
    </fieldset>
  );
}
