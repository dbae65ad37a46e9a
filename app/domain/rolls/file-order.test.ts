import { expect, it } from "vitest";
import { inFileOrder } from "./file-order";

it("files stand in the order in which their names count", () => {
  const names = ["r10.tif", "R2.tif", "r1.tif", "r02b.tif", "r1.tif"];
  expect(inFileOrder(names.map((name) => ({ name }))).map((file) => file.name)).toEqual([
    "r1.tif",
    "r1.tif",
    "R2.tif",
    "r02b.tif",
    "r10.tif",
  ]);
});
