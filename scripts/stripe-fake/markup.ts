/** Text that is HTML already and is not escaped again. */
export class Markup {
  constructor(readonly text: string) {}
}

type Piece = string | number | Markup | null | false | readonly Piece[];

function written(piece: Piece): string {
  if (piece === null || piece === false) return "";
  if (piece instanceof Markup) return piece.text;
  if (Array.isArray(piece)) return piece.map(written).join("");
  return String(piece)
    .replaceAll("&", "&amp;")
    .replaceAll("<", "&lt;")
    .replaceAll(">", "&gt;")
    .replaceAll('"', "&quot;")
    .replaceAll("'", "&#39;");
}

/** HTML from a template; everything put into it is escaped unless it is `Markup` itself. */
export function html(strings: TemplateStringsArray, ...pieces: Piece[]): Markup {
  return new Markup(strings.reduce((text, part, at) => text + written(pieces[at - 1] ?? "") + part));
}
