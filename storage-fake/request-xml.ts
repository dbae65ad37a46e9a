import { DigestSet } from "./checksums";
import { StorageError } from "./errors";
import { IncomingContent } from "./incoming-content";
import type { RequestContext } from "./request-context";
import { parseXml, type XmlNode } from "./xml";

export interface RequestXml {
  root: XmlNode;
  /** Whether the client gave a checksum of the document, which has then been compared. */
  checked: boolean;
}

export interface RequestXmlOptions {
  rootName: string;
  /** A longer document is refused before it is read. */
  maximumBytes: number;
  /** False where checksum headers are of something else than the document. */
  checksumsAreOfBody: boolean;
}

/**
 * Reads a request's XML document whole, after checking what the client said about its bytes.
 * @throws StorageError MalformedXML, EntityTooLarge and all that `IncomingContent` throws
 */
export async function readRequestXml(
  context: RequestContext,
  options: RequestXmlOptions,
): Promise<RequestXml> {
  const content = IncomingContent.describe(context.incoming, options.checksumsAreOfBody);
  if (content.length > options.maximumBytes) {
    throw new StorageError("EntityTooLarge", "The request's document is larger than allowed.", {
      details: { ProposedSize: String(content.length), MaxSizeAllowed: String(options.maximumBytes) },
    });
  }
  const digests = new DigestSet(content.digestNames);
  const pieces: Buffer[] = [];
  for await (const piece of content.pieces()) {
    digests.update(piece);
    pieces.push(piece);
  }
  content.verify(digests.finish());
  const root = parseXml(Buffer.concat(pieces).toString("utf8"));
  if (root.name !== options.rootName) {
    throw new StorageError("MalformedXML", `The document must be a ${options.rootName}.`);
  }
  return { root, checked: content.hasIntegrityCheck };
}
