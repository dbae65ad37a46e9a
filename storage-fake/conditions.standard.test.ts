import { expect, test } from "vitest";
import { type Conditions, evaluateConditions } from "./conditions";

const MODIFIED = "Tue, 01 Dec 2026 10:00:00 GMT";
const EARLIER = "Tue, 01 Dec 2026 09:59:59 GMT";
const current = { etag: "abc", modifiedAt: Date.parse(MODIFIED) + 400 };
const none: Conditions = {
  ifMatch: undefined,
  ifNoneMatch: undefined,
  ifModifiedSince: undefined,
  ifUnmodifiedSince: undefined,
};

// RFC 9110 (2022), section 13.2.2 "Precedence of Preconditions"; dates have whole seconds (section 5.6.7).
test.each<[string, Partial<Conditions>, string]>([
  ["no condition", {}, "proceed"],
  ["If-Match with the tag", { ifMatch: '"abc"' }, "proceed"],
  ["If-Match with one of several", { ifMatch: '"x", "abc"' }, "proceed"],
  ["If-Match with any", { ifMatch: "*" }, "proceed"],
  ["If-Match with another", { ifMatch: '"x"' }, "failed"],
  ["If-Unmodified-Since the same second", { ifUnmodifiedSince: MODIFIED }, "proceed"],
  ["If-Unmodified-Since before", { ifUnmodifiedSince: EARLIER }, "failed"],
  ["If-Match speaks before the date", { ifMatch: '"abc"', ifUnmodifiedSince: EARLIER }, "proceed"],
  ["If-None-Match with the tag", { ifNoneMatch: 'W/"abc"' }, "not-modified"],
  ["If-None-Match with another", { ifNoneMatch: '"x"' }, "proceed"],
  ["If-Modified-Since the same second", { ifModifiedSince: MODIFIED }, "not-modified"],
  ["If-Modified-Since before", { ifModifiedSince: EARLIER }, "proceed"],
  ["If-None-Match speaks before the date", { ifNoneMatch: '"x"', ifModifiedSince: MODIFIED }, "proceed"],
  ["what must hold comes first", { ifMatch: '"x"', ifNoneMatch: '"abc"' }, "failed"],
  ["a date that is none is ignored", { ifModifiedSince: "soon", ifUnmodifiedSince: "then" }, "proceed"],
])("%s", (_name, conditions, outcome) => {
  expect(evaluateConditions({ ...none, ...conditions }, current)).toBe(outcome);
});
