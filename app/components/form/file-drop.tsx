import { type ComponentProps, type DragEvent, useState } from "react";
import { ariaFor, FieldFrame, type FieldWords } from "~/components/form/field-frame";

export type FileDropProps = FieldWords &
  Omit<ComponentProps<"input">, "id" | "className" | "type"> & {
    name: string;
    /** Called with the files chosen or dropped; without it they are sent with the form. */
    onFiles?: (files: File[]) => void;
  };

/**
 * A place to choose files or to drop them on. It is the browser's own control made large, so that both
 * work without script.
 */
export function FileDrop({
  id: givenId,
  label,
  hint,
  error,
  span,
  name,
  onFiles,
  multiple = true,
  ...input
}: FileDropProps) {
  const id = givenId ?? name;
  const [over, setOver] = useState(false);
  function leave(event: DragEvent<HTMLInputElement>) {
    event.stopPropagation();
    setOver(false);
  }
  return (
    <FieldFrame id={id} label={label} hint={hint} error={error} span={span}>
      <input
        {...input}
        {...ariaFor(id, { hint, error })}
        type="file"
        id={id}
        name={name}
        multiple={multiple}
        className="drop"
        data-over={over ? "" : undefined}
        onDragEnter={() => setOver(true)}
        onDragLeave={leave}
        onDrop={leave}
        onChange={(event) => {
          input.onChange?.(event);
          if (onFiles) onFiles(Array.from(event.currentTarget.files ?? []));
        }}
      />
    </FieldFrame>
  );
}
