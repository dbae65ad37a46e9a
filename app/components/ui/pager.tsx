import { Link } from "react-router";

export type PagerLink = { label: string; to: string };

export type PagerProps = {
  /** Names the navigation: "Pages of orders". */
  label: string;
  /** "Orders 51 to 100 of 312" */
  words: string;
  previous?: PagerLink;
  next?: PagerLink;
};

/** Where one is in a long list, and the way on. */
export function Pager({ label, words, previous, next }: PagerProps) {
  return (
    <nav className="pager" aria-label={label}>
      <p className="quiet fig">{words}</p>
      <ul>
        {previous ? (
          <li>
            <Link rel="prev" to={previous.to}>
              {previous.label}
            </Link>
          </li>
        ) : null}
        {next ? (
          <li>
            <Link rel="next" to={next.to}>
              {next.label}
            </Link>
          </li>
        ) : null}
      </ul>
    </nav>
  );
}
