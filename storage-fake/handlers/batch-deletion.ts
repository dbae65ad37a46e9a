import { stripETag } from "../conditions";
import { StorageError } from "../errors";
import type { RequestContext } from "../request-context";
import { readRequestXml } from "../request-xml";
import { childrenNamed, childText, element, type Markup } from "../xml";

/** The most objects one request may name (S3 API reference, DeleteObjects). */
const MAXIMUM_OBJECTS = 1000;
const MAXIMUM_DOCUMENT_BYTES = 2 * 1024 * 1024;

/** POST ?delete: deletes up to a thousand objects, and says of each whether it went. */
export async function deleteObjects(context: RequestContext): Promise<void> {
  const { objects } = context.bucket;
  const { root, checked } = await readRequestXml(context, {
    rootName: "Delete",
    maximumBytes: MAXIMUM_DOCUMENT_BYTES,
    checksumsAreOfBody: true,
  });
  if (!checked) {
    throw new StorageError(
      "InvalidRequest",
      "Content-MD5 or a checksum is missing, which this request needs.",
    );
  }
  const named = childrenNamed(root, "Object");
  if (named.length === 0 || named.length > MAXIMUM_OBJECTS) {
    throw new StorageError("MalformedXML", `One to ${MAXIMUM_OBJECTS} objects must be named.`);
  }
  const keys = named.map((object) => {
    const key = childText(object, "Key");
    if (!key) throw new StorageError("MalformedXML", "An object without a key is named.");
    return { key, etag: childText(object, "ETag"), versionId: childText(object, "VersionId") };
  });

  const quiet = childText(root, "Quiet") === "true";
  const results: Markup[] = [];
  for (const { key, etag, versionId } of keys) {
    try {
      if (versionId !== undefined && versionId !== "null") {
        throw new StorageError("NotImplemented", "Objects have no versions here.");
      }
      await objects.delete(key, { ifMatch: etag === undefined ? undefined : stripETag(etag) });
      if (!quiet) results.push(element("Deleted", [element("Key", key)]));
    } catch (error) {
      if (!(error instanceof StorageError)) throw error;
      results.push(
        element("Error", [
          element("Key", key),
          element("Code", error.code),
          element("Message", error.message),
        ]),
      );
    }
  }
  context.sendXml("DeleteResult", results);
}
