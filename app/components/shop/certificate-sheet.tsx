import { type ReactNode, useId } from "react";
import { Link } from "react-router";
import { type Fact, Facts } from "~/components/ui/facts";
import { MarginLine, type MarginLineProps } from "~/components/ui/margin-line";
import { Picture, type PictureProps } from "~/components/ui/picture";

export type CertificateSheetProps = {
  /** "Certificate" */
  title: string;
  /** Name and address of the studio, in lines. */
  studio: string;
  /** "This sheet exists once. It is number seven, and no other seven will be made." */
  opening: string;
  picture: PictureProps;
  marginLine: MarginLineProps;
  facts: readonly Fact[];
  check: {
    /** The check code as a square code: modules a side, and their path in units of one module. */
    square: { size: number; path: string; label: string };
    /** "Check this print at harcastle.example/check" */
    where: string;
    code: string;
    /** "Issued 26 November 2026", "Certificate 0412, ledger line 58", in lines. */
    issued: string;
  };
  /** The name as signed and as printed under it, and the words round the blind stamp. */
  signature: { hand: string; name: string; stamp: string };
};

/** A certificate: one A4 page made to be printed. */
export function CertificateSheet({
  title,
  studio,
  opening,
  picture,
  marginLine,
  facts,
  check,
  signature,
}: CertificateSheetProps) {
  const { size, path, label } = check.square;
  return (
    <main id="main" className="a4" tabIndex={-1}>
      <header className="a4-head">
        <h1>{title}</h1>
        <p>{studio}</p>
      </header>
      <p className="opening">{opening}</p>
      <figure className="piece sheet">
        <Picture {...picture} />
        <MarginLine {...marginLine} />
      </figure>
      <Facts items={facts} />
      <footer className="a4-foot">
        <svg
          viewBox={`-2 -2 ${size + 4} ${size + 4}`}
          role="img"
          aria-label={label}
          shapeRendering="crispEdges"
        >
          <path fill="#ffffff" d={`M-2-2H${size + 2}V${size + 2}H-2Z`} />
          <path fill="#1c1b19" d={path} />
        </svg>
        <div>
          <p className="small">{check.where}</p>
          <p className="code">{check.code}</p>
          <p className="small">{check.issued}</p>
        </div>
        <div className="sign">
          <BlindStamp words={signature.stamp} />
          <span className="hand">{signature.hand}</span>
          <span className="hand-rule">{signature.name}</span>
        </div>
      </footer>
    </main>
  );
}

export type CertificateDeskProps = {
  /** Names what stands above the page: "This page". */
  label: string;
  back: { label: string; to: string };
  /** "One A4 page, margins set. Print it from the browser's menu." */
  words: string;
  children: ReactNode;
};

/** What a page made to be printed lies on; none of it is printed. */
export function CertificateDesk({ label, back, words, children }: CertificateDeskProps) {
  return (
    <div className="desk">
      <nav className="desk-bar no-print" aria-label={label}>
        <Link to={back.to}>{back.label}</Link>
        <span className="note">{words}</span>
      </nav>
      {children}
    </div>
  );
}

/** A stamp pressed into the paper without ink: seen by its shadow and its light. */
function BlindStamp({ words }: { words: string }) {
  const ring = useId();
  return (
    <svg className="stamp" viewBox="0 0 100 100" aria-hidden="true" focusable="false">
      <g transform="translate(.8 .8)">
        <circle cx="50" cy="50" r="46" />
        <circle cx="50" cy="50" r="36" />
        <path d="M22 63C32 55 38 55 46 60S62 66 78 56M26 70C36 64 42 64 50 68S64 72 74 66M50 58V34M50 46L41 38M50 42L60 33M50 36L45 30" />
      </g>
      <g className="stamp-light" transform="translate(-.6 -.6)">
        <circle cx="50" cy="50" r="46" />
        <circle cx="50" cy="50" r="36" />
      </g>
      <path id={ring} d="M50 91A41 41 0 1 1 50.1 91" fill="none" />
      <text>
        <textPath href={`#${ring}`} startOffset="1%">
          {words}
        </textPath>
      </text>
    </svg>
  );
}
