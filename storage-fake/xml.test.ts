import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { childrenNamed, childText, element, parseXml, xmlDocument } from "./xml";

describe("what is written can be read", () => {
  test("any text comes back as it was", () => {
    fc.assert(
      fc.property(fc.string({ unit: "binary" }), (text) => {
        const root = parseXml(xmlDocument("Root", [element("Key", text), element("Key", "second")]));
        expect(childrenNamed(root, "Key").map((node) => node.text)).toEqual([text, "second"]);
      }),
    );
  });
});

describe("what clients send", () => {
  test("namespaces, attributes, comments, CDATA and references", () => {
    const root = parseXml(
      '\uFEFF<?xml version="1.0"?>\n<!-- a --><d:Delete xmlns:d="urn:x" a=\'1\'>' +
        "<Object><Key> a&amp;b&#252;&#x1F39E;<![CDATA[<c>]]></Key></Object><Quiet/></d:Delete >\n",
    );
    expect(root.name).toBe("Delete");
    const [object] = childrenNamed(root, "Object");
    expect(object && childText(object, "Key")).toBe(" a&bü\u{1f39e}<c>");
    expect(childText(root, "Quiet")).toBe("");
    expect(childText(root, "Other")).toBeUndefined();
  });

  test.each([
    ["nothing", ""],
    ["an element left open", "<a><b></b>"],
    ["elements that overlap", "<a><b></a></b>"],
    ["a closing name that only begins alike", "<a><bb></b></a>"],
    ["something after the root", "<a/><b/>"],
    ["a document type", '<!DOCTYPE a [<!ENTITY x "y">]><a>&x;</a>'],
    ["an entity of the sender's own", "<a>&x;</a>"],
    ["a reference to a surrogate", "<a>&#xD800;</a>"],
    ["a bare ampersand", "<a>b & c</a>"],
    ["very deep nesting", `${"<a>".repeat(100)}${"</a>".repeat(100)}`],
  ])("%s is refused", (_name, source) => {
    expect(() => parseXml(source)).toThrow(expect.objectContaining({ code: "MalformedXML" }));
  });
});
