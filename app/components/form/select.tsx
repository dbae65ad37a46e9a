import type { ComponentProps } from "react";
import { ariaFor, FieldFrame, type FieldWords } from "~/components/form/field-frame";

export type SelectOption = { value: string; label: string; disabled?: boolean };

export type SelectProps = FieldWords &
  Omit<ComponentProps<"select">, "id" | "className" | "children"> & {
    name: string;
    options: readonly (SelectOption | { label: string; options: readonly SelectOption[] })[];
    /** A first line that stands for no answer: "Choose a paper". */
    blank?: string;
  };

/** One of a list. */
export function Select({
  id: givenId,
  label,
  hint,
  error,
  span,
  name,
  options,
  blank,
  ...select
}: SelectProps) {
  const id = givenId ?? name;
  return (
    <FieldFrame id={id} label={label} hint={hint} error={error} span={span}>
      <select {...select} {...ariaFor(id, { hint, error })} id={id} name={name} className="input">
        {blank === undefined ? null : <option value="">{blank}</option>}
        {options.map((option) =>
          "options" in option ? (
            <optgroup key={option.label} label={option.label}>
              {option.options.map((inner) => (
                <Option key={inner.value} {...inner} />
              ))}
            </optgroup>
          ) : (
            <Option key={option.value} {...option} />
          ),
        )}
      </select>
    </FieldFrame>
  );
}

function Option({ value, label, disabled }: SelectOption) {
  return (
    <option value={value} disabled={disabled}>
      {label}
    </option>
  );
}

export type CountrySelectProps = Omit<SelectProps, "options" | "defaultValue"> & {
  /** ISO 3166-1 alpha-2, of the country taken at first. */
  value?: string;
  /** In the order they are to be shown. */
  countries: readonly { code: string; name: string }[];
};

/** The country a parcel goes to, or a party lives in. */
export function CountrySelect({ value, countries, ...rest }: CountrySelectProps) {
  return (
    <Select
      autoComplete="country"
      {...rest}
      defaultValue={value}
      options={countries.map((country) => ({ value: country.code, label: country.name }))}
    />
  );
}
