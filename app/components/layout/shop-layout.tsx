import type { ReactNode } from "react";
import { Link, NavLink } from "react-router";
import { UnderSafelight } from "~/components/layout/under-safelight";

export type ShopLink = { label: string; to: string };

export type ShopNavItem = ShopLink & {
  /** The end of the label, dropped on a narrow page: " a print". */
  more?: string;
};

export type ShopLayoutProps = {
  /** "Sunniva Harcastle" and, set lighter, "Photographs". */
  studioName: { name: string; kind?: string };
  home: string;
  nav: readonly ShopNavItem[];
  navLabel: string;
  basket: ShopLink;
  basketCount: number;
  /** The other languages of this page, each in its own words. */
  languageLinks: readonly (ShopLink & { lang: string })[];
  languagesLabel: string;
  /** Columns of the colophon. */
  footer?: readonly { title: string; children: ReactNode }[];
  /** The last line. */
  footerNote?: ReactNode;
  footerLinks: readonly ShopLink[];
  skipLabel: string;
  children: ReactNode;
};

/** The shop's page: masthead, mount, colophon. */
export function ShopLayout({
  studioName,
  home,
  nav,
  navLabel,
  basket,
  basketCount,
  languageLinks,
  languagesLabel,
  footer = [],
  footerNote,
  footerLinks,
  skipLabel,
  children,
}: ShopLayoutProps) {
  return (
    <>
      <a className="skip" href="#main">
        {skipLabel}
      </a>
      <UnderSafelight />
      <header className="masthead page">
        <Link className="studio-name" to={home}>
          {studioName.name} {studioName.kind ? <em>{studioName.kind}</em> : null}
        </Link>
        <nav aria-label={navLabel}>
          <ul>
            {nav.map((item) => (
              <li key={item.to}>
                <NavLink to={item.to}>
                  {item.label}
                  {item.more ? <span className="wide">{item.more}</span> : null}
                </NavLink>
              </li>
            ))}
            <li>
              <NavLink to={basket.to}>
                {basket.label} <span className="fig">({basketCount})</span>
              </NavLink>
            </li>
          </ul>
        </nav>
        {languageLinks.length > 0 ? (
          <nav className="languages" aria-label={languagesLabel}>
            <ul>
              {languageLinks.map((link) => (
                <li key={link.lang}>
                  <Link to={link.to} hrefLang={link.lang} lang={link.lang}>
                    {link.label}
                  </Link>
                </li>
              ))}
            </ul>
          </nav>
        ) : null}
      </header>
      <main id="main" className="page" tabIndex={-1}>
        {children}
      </main>
      <footer className="colophon page">
        {footer.length > 0 ? (
          <div className="cols">
            {footer.map((column) => (
              <section key={column.title}>
                <h2>{column.title}</h2>
                {column.children}
              </section>
            ))}
          </div>
        ) : null}
        <div className="last">
          {footerNote ? <p>{footerNote}</p> : null}
          <ul>
            {footerLinks.map((link) => (
              <li key={link.to}>
                <Link to={link.to}>{link.label}</Link>
              </li>
            ))}
          </ul>
        </div>
      </footer>
    </>
  );
}
