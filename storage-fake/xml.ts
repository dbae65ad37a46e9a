import { StorageError } from "./errors";

/** Text that is already XML. */
export class Markup {
  constructor(readonly text: string) {}
}

export type Content = string | number | boolean | Markup | readonly Markup[];

/** An element with escaped text or with child elements. */
export function element(name: string, content: Content): Markup {
  return new Markup(`<${name}>${render(content)}</${name}>`);
}

/** The element, or nothing when there is no value for it. */
export function optionalElement(name: string, content: Content | undefined): Markup[] {
  return content === undefined ? [] : [element(name, content)];
}

function render(content: Content): string {
  if (content instanceof Markup) return content.text;
  if (typeof content === "object") return content.map((child) => child.text).join("");
  return escapeText(String(content));
}

/** Escapes markup and every control character, so that a carriage return in a key survives the reader's parser. */
function escapeText(text: string): string {
  // biome-ignore lint/suspicious/noControlCharactersInRegex: they are what is looked for.
  return text.replace(/[&<>"\u0000-\u001f\u007f]/g, (character) => {
    if (character === "&") return "&amp;";
    if (character === "<") return "&lt;";
    if (character === ">") return "&gt;";
    if (character === '"') return "&quot;";
    return `&#${character.charCodeAt(0)};`;
  });
}

const NAMESPACE = "http://s3.amazonaws.com/doc/2006-03-01/";

/** A whole document; every root but `Error` is in the protocol's namespace. */
export function xmlDocument(root: string, content: Content): string {
  const namespace = root === "Error" ? "" : ` xmlns="${NAMESPACE}"`;
  return `<?xml version="1.0" encoding="UTF-8"?>\n<${root}${namespace}>${render(content)}</${root}>`;
}

export interface XmlNode {
  /** Without its namespace prefix. */
  name: string;
  children: XmlNode[];
  /** All text directly inside, as it stands. */
  text: string;
}

const MAXIMUM_DEPTH = 16;
const NAMED_ENTITIES: Readonly<Record<string, string>> = { amp: "&", lt: "<", gt: ">", quot: '"', apos: "'" };
const NAME = /[A-Za-z_][\w.-]*(?::[A-Za-z_][\w.-]*)?/y;
const ATTRIBUTE = /\s+[A-Za-z_][\w.:-]*\s*=\s*(?:"[^"<]*"|'[^'<]*')/y;

/**
 * Parses the small XML documents that clients send: elements, text, character references and CDATA. Attributes are
 * read over, comments skipped. A document type is refused, and with it every entity but the five of XML itself.
 * @throws StorageError MalformedXML
 */
export function parseXml(source: string): XmlNode {
  return new XmlParser(source).document();
}

class XmlParser {
  private position = 0;

  constructor(private readonly source: string) {}

  document(): XmlNode {
    if (this.source.startsWith("\uFEFF")) this.position = 1;
    if (this.source.startsWith("<?xml", this.position)) this.skipPast("?>");
    this.skipMisc();
    const root = this.element(0);
    this.skipMisc();
    if (this.position !== this.source.length) throw malformed("something follows the root element");
    return root;
  }

  private skipMisc(): void {
    for (;;) {
      this.match(/\s*/y);
      if (this.source.startsWith("<!--", this.position)) this.skipPast("-->");
      else return;
    }
  }

  private element(depth: number): XmlNode {
    if (depth > MAXIMUM_DEPTH) throw malformed("it is nested too deeply");
    this.expect("<");
    const fullName = this.match(NAME);
    if (!fullName) throw malformed("an element has no name");
    while (this.match(ATTRIBUTE)) {}
    this.match(/\s*/y);
    const node: XmlNode = { name: fullName.slice(fullName.indexOf(":") + 1), children: [], text: "" };
    if (this.source.startsWith("/>", this.position)) {
      this.position += 2;
      return node;
    }
    this.expect(">");
    this.content(node, depth);
    this.expect(`</${fullName}`);
    this.match(/\s*/y);
    this.expect(">");
    return node;
  }

  private content(node: XmlNode, depth: number): void {
    for (;;) {
      const next = this.source.indexOf("<", this.position);
      if (next === -1) throw malformed("an element is not closed");
      node.text += unescapeText(this.source.slice(this.position, next));
      this.position = next;
      if (this.source.startsWith("</", next)) return;
      if (this.source.startsWith("<!--", next)) this.skipPast("-->");
      else if (this.source.startsWith("<![CDATA[", next)) node.text += this.skipPast("]]>").slice(9, -3);
      else node.children.push(this.element(depth + 1));
    }
  }

  private match(pattern: RegExp): string {
    pattern.lastIndex = this.position;
    const found = pattern.exec(this.source)?.[0] ?? "";
    this.position += found.length;
    return found;
  }

  private expect(text: string): void {
    if (!this.source.startsWith(text, this.position)) throw malformed(`"${text}" was expected`);
    this.position += text.length;
  }

  private skipPast(end: string): string {
    const found = this.source.indexOf(end, this.position);
    if (found === -1) throw malformed(`"${end}" is missing`);
    const skipped = this.source.slice(this.position, found + end.length);
    this.position = found + end.length;
    return skipped;
  }
}

function unescapeText(text: string): string {
  return text
    .replace(/\r\n?/g, "\n")
    .replace(/&(?:#x([0-9a-fA-F]{1,6})|#([0-9]{1,7})|(\w+));|&/g, (_match, hex, decimal, name) => {
      if (name !== undefined) {
        const character = NAMED_ENTITIES[name];
        if (character !== undefined) return character;
      } else {
        const code = hex !== undefined ? Number.parseInt(hex, 16) : Number.parseInt(decimal, 10);
        if (code <= 0x10ffff && (code < 0xd800 || code > 0xdfff)) return String.fromCodePoint(code);
      }
      throw malformed("it has an entity that is not known");
    });
}

function malformed(what: string): StorageError {
  return new StorageError("MalformedXML", `The XML of the request is not well-formed: ${what}.`);
}

/** The text of the only child of a name; undefined when there is none. */
export function childText(node: XmlNode, name: string): string | undefined {
  return node.children.find((child) => child.name === name)?.text;
}

/** Every child of a name. */
export function childrenNamed(node: XmlNode, name: string): XmlNode[] {
  return node.children.filter((child) => child.name === name);
}
