import type { ReactNode } from "react";
import { Link } from "react-router";
import { UnderSafelight } from "~/components/layout/under-safelight";

export type PlainLayoutProps = {
  studioName: string;
  /** Where the name leads; nowhere before the studio is set up. */
  home?: string;
  skipLabel: string;
  /** Under the sheet: links to what one may have been looking for. */
  foot?: ReactNode;
  children: ReactNode;
};

/** One narrow sheet and nothing else: signing in, setting up. */
export function PlainLayout({ studioName, home, skipLabel, foot, children }: PlainLayoutProps) {
  return (
    <div className="plain-page">
      <a className="skip" href="#main">
        {skipLabel}
      </a>
      <UnderSafelight />
      <header>
        {home ? (
          <Link className="studio-name" to={home}>
            {studioName}
          </Link>
        ) : (
          <p className="studio-name">{studioName}</p>
        )}
      </header>
      <main id="main" className="window window-pad" tabIndex={-1}>
        {children}
      </main>
      {foot ? <footer>{foot}</footer> : null}
    </div>
  );
}
