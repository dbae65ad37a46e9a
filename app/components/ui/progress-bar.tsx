export type ProgressBarProps = {
  /** Left out while the amount is not known. */
  value?: number;
  /** 100 when left out. */
  max?: number;
  /** Names what is under way: "Frame 6". */
  label: string;
  /** Said in place of the bar where it cannot be drawn: "68 %". */
  text: string;
  thin?: boolean;
};

/** A bar filled with ink from the left. */
export function ProgressBar({ value, max = 100, label, text, thin }: ProgressBarProps) {
  return (
    <progress className={thin ? "bar bar-thin" : "bar"} value={value} max={max} aria-label={label}>
      {text}
    </progress>
  );
}
