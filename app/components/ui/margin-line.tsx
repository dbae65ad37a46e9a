export type MarginLineProps = {
  /** "12/15", "AP 1/3"; left out when no copy is spoken of. */
  number?: string | null;
  title: string;
  /** "S. Harcastle 2025" */
  signature: string;
};

/** The lower margin of a signed print: number left, title in the middle, signature and year right. */
export function MarginLine({ number, title, signature }: MarginLineProps) {
  const [copy, limit] = (number ?? "").split("/");
  return (
    <p className="margin-line">
      <span>
        {copy}
        {limit ? (
          <>
            <span className="of">/</span>
            {limit}
          </>
        ) : null}
      </span>{" "}
      <span>{title}</span> <span>{signature}</span>
    </p>
  );
}
