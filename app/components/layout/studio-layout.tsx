import { type ReactNode, useEffect, useRef } from "react";
import { Form, Link, NavLink, useLocation } from "react-router";
import { UnderSafelight } from "~/components/layout/under-safelight";

export type StudioTheme = "day" | "safelight";

export type StudioIndexItem = {
  label: string;
  to: string;
  count?: number;
  /** Said with the count: "waiting"; for those who hear it. */
  countWords?: string;
  /** Current only on its own address, not below it. */
  end?: boolean;
};

export type StudioLayoutProps = {
  /** The studio's short name, leading to the shop. */
  studioName: string;
  home: string;
  who: string;
  role: string;
  items: readonly StudioIndexItem[];
  theme: StudioTheme;
  /** Where the form that changes the theme is posted, with `theme` and `from`. */
  themeAction: string;
  /** Where the form that signs out is posted. */
  signOutAction: string;
  /** "Ember time (UTC)" */
  zone: string;
  children: ReactNode;
};

/** The studio's page: its index at the left (along the top on a telephone), the bench beside it. */
export function StudioLayout({
  studioName,
  home,
  who,
  role,
  items,
  theme,
  themeAction,
  signOutAction,
  zone,
  children,
}: StudioLayoutProps) {
  const { pathname, search } = useLocation();
  const list = useRef<HTMLUListElement>(null);
  // biome-ignore lint/correctness/useExhaustiveDependencies: the current line moves with the address
  useEffect(() => {
    const current = list.current?.querySelector<HTMLElement>("[aria-current]");
    if (current && list.current) list.current.scrollLeft = current.offsetLeft - list.current.clientWidth / 3;
  }, [pathname]);
  const other: StudioTheme = theme === "day" ? "safelight" : "day";
  return (
    <div className="studio">
      <a className="skip" href="#main">
        Skip to the page
      </a>
      <UnderSafelight />
      <div className="studio-grid">
        <nav className="index" aria-label="Studio">
          <div className="in">
            <p className="who">
              <Link className="studio-name" to={home}>
                {studioName}
              </Link>{" "}
              <span className="note">
                {who}, {role}
              </span>
            </p>
            <ul ref={list}>
              {items.map((item) => (
                <li key={item.to}>
                  <NavLink to={item.to} end={item.end}>
                    {item.label}{" "}
                    {item.count === undefined ? null : (
                      <span className="count">
                        {item.count}
                        {item.countWords ? <span className="vh"> {item.countWords}</span> : null}
                      </span>
                    )}
                  </NavLink>
                </li>
              ))}
            </ul>
            <div className="foot">
              <Form method="post" action={themeAction} preventScrollReset>
                <input type="hidden" name="theme" value={other} />
                <input type="hidden" name="from" value={pathname + search} />
                <button type="submit" className="plain">
                  {theme === "day" ? "Put under the safelight" : "Back to daylight"}
                </button>
              </Form>
              <Form method="post" action={signOutAction}>
                <button type="submit" className="plain">
                  Sign out
                </button>
              </Form>
              <span>
                <span className="wide">All times are </span>
                {zone}
              </span>
            </div>
          </div>
        </nav>
        <main id="main" className="bench" tabIndex={-1}>
          {children}
        </main>
      </div>
    </div>
  );
}
