import { createHash, randomBytes } from "node:crypto";
import { writeFile } from "node:fs/promises";
import { join } from "node:path";
import {
  AbortMultipartUploadCommand,
  type CompletedPart,
  CompleteMultipartUploadCommand,
  CopyObjectCommand,
  CreateMultipartUploadCommand,
  DeleteObjectCommand,
  GetObjectCommand,
  HeadObjectCommand,
  ListMultipartUploadsCommand,
  ListObjectsV2Command,
  ListPartsCommand,
  PutObjectCommand,
  type S3Client,
  UploadPartCommand,
  UploadPartCopyCommand,
} from "@aws-sdk/client-s3";
import { getSignedUrl } from "@aws-sdk/s3-request-presigner";
import { afterEach, beforeEach, describe, expect, test } from "vitest";
import { createCrc } from "../../storage-fake/crc";
import { ORIGIN, PRIVATE, send, TestStorage } from "../support/storage-server";

const MINIMUM = 5 * 1024 * 1024;
const FIRST = randomBytes(MINIMUM);
const SECOND = randomBytes(MINIMUM + 1000);
const LAST = randomBytes(12_345);
const WHOLE = Buffer.concat([FIRST, SECOND, LAST]);

let storage: TestStorage;
/** Set as the project sets its own: without a checksum nobody asked for. */
let s3: S3Client;

beforeEach(async () => {
  storage = await TestStorage.open();
  s3 = storage.client({ requestChecksumCalculation: "WHEN_REQUIRED" });
});
afterEach(() => storage.dispose());

const md5 = (data: Buffer) => createHash("md5").update(data).digest();
const failure = (name: string, status: number) =>
  expect.objectContaining({ name, $metadata: expect.objectContaining({ httpStatusCode: status }) });

async function begin(key = "scan", more: object = {}, client = s3): Promise<string> {
  const answer = await client.send(new CreateMultipartUploadCommand({ Bucket: PRIVATE, Key: key, ...more }));
  if (!answer.UploadId) throw new Error("no upload id");
  return answer.UploadId;
}

/** Uploads a part and gives what its completion must say of it. */
async function uploadPart(
  UploadId: string,
  PartNumber: number,
  Body: Buffer,
  more: { Key?: string; ChecksumAlgorithm?: "CRC32" | "SHA256"; client?: S3Client } = {},
): Promise<CompletedPart> {
  const { client = s3, Key = "scan", ...rest } = more;
  const answer = await client.send(
    new UploadPartCommand({ Bucket: PRIVATE, Key, UploadId, PartNumber, Body, ...rest }),
  );
  const { ETag, ChecksumCRC32, ChecksumSHA256 } = answer;
  return { PartNumber, ETag, ChecksumCRC32, ChecksumSHA256 };
}

const complete = (UploadId: string, Parts: CompletedPart[], more: object = {}, client = s3) =>
  client.send(
    new CompleteMultipartUploadCommand({
      Bucket: PRIVATE,
      Key: "scan",
      UploadId,
      MultipartUpload: { Parts },
      ...more,
    }),
  );

async function uploadThreeParts(uploadId: string): Promise<CompletedPart[]> {
  const bodies = [FIRST, SECOND, LAST];
  return await Promise.all(bodies.map((body, index) => uploadPart(uploadId, index + 1, body)));
}

async function bytes(key = "scan", more: object = {}): Promise<Buffer> {
  const got = await s3.send(new GetObjectCommand({ Bucket: PRIVATE, Key: key, ...more }));
  return Buffer.from((await got.Body?.transformToByteArray()) ?? []);
}

const listParts = (UploadId: string, more: object = {}) =>
  s3.send(new ListPartsCommand({ Bucket: PRIVATE, Key: "scan", UploadId, ...more }));
const head = (more: object = {}) => s3.send(new HeadObjectCommand({ Bucket: PRIVATE, Key: "scan", ...more }));

describe("an upload in parts", () => {
  test("becomes one object, and only by being completed", async () => {
    const uploadId = await begin("scan", { ContentType: "image/tiff", Metadata: { frame: "7" } });
    const parts = await uploadThreeParts(uploadId);
    expect(parts.map((part) => part.ETag)).toEqual(
      [FIRST, SECOND, LAST].map((body) => `"${md5(body).toString("hex")}"`),
    );
    await expect(head()).rejects.toEqual(failure("NotFound", 404));

    const answer = await complete(uploadId, parts);
    const etag = `"${md5(Buffer.concat([FIRST, SECOND, LAST].map(md5))).toString("hex")}-3"`;
    expect(answer).toMatchObject({ Bucket: PRIVATE, Key: "scan", ETag: etag });
    expect(answer.Location).toBe(`${storage.url}/${PRIVATE}/scan`);
    expect(await head()).toMatchObject({
      ContentLength: WHOLE.length,
      ContentType: "image/tiff",
      Metadata: { frame: "7" },
      ETag: etag,
    });
    expect((await bytes()).equals(WHOLE)).toBe(true);
    await expect(listParts(uploadId)).rejects.toEqual(failure("NoSuchUpload", 404));
  });

  test("is read by ranges across its parts, and by part", async () => {
    await complete(await begin(), []).catch(() => {});
    const uploadId = await begin();
    await complete(uploadId, await uploadThreeParts(uploadId));
    for (const [from, to] of [
      [MINIMUM - 10, MINIMUM + 10],
      [0, WHOLE.length],
      [MINIMUM - 1, FIRST.length + SECOND.length + 1],
      [WHOLE.length - 5, WHOLE.length],
    ] as const) {
      const range = await bytes("scan", { Range: `bytes=${from}-${to - 1}` });
      expect(range.equals(WHOLE.subarray(from, to))).toBe(true);
    }
    const part = await s3.send(new GetObjectCommand({ Bucket: PRIVATE, Key: "scan", PartNumber: 3 }));
    expect(part).toMatchObject({ PartsCount: 3, ContentLength: LAST.length });
    expect(Buffer.from((await part.Body?.transformToByteArray()) ?? []).equals(LAST)).toBe(true);
    await expect(bytes("scan", { PartNumber: 4 })).rejects.toEqual(failure("InvalidPartNumber", 416));
  });

  test("shows the parts it has, in pages; a part sent again replaces the first", async () => {
    const uploadId = await begin();
    for (const number of [4, 2, 10]) await uploadPart(uploadId, number, Buffer.from(`part ${number}`));
    await uploadPart(uploadId, 2, Buffer.from("part two once more"));
    const all = await listParts(uploadId);
    expect(all.Parts?.map((part) => [part.PartNumber, part.Size])).toEqual([
      [2, 18],
      [4, 6],
      [10, 7],
    ]);
    expect(all).toMatchObject({ UploadId: uploadId, IsTruncated: false, NextPartNumberMarker: "10" });
    const page = await listParts(uploadId, { MaxParts: 2 });
    expect(page).toMatchObject({ IsTruncated: true, NextPartNumberMarker: "4" });
    const rest = await listParts(uploadId, { PartNumberMarker: page.NextPartNumberMarker });
    expect(rest.Parts?.map((part) => part.PartNumber)).toEqual([10]);
    const kept = (await storage.files()).filter((file) => file.endsWith(".data"));
    expect(kept).toHaveLength(3);
  });

  test("goes on after a restart", async () => {
    const uploadId = await begin();
    const first = await uploadPart(uploadId, 1, FIRST);
    await storage.restart();
    s3 = storage.client({ requestChecksumCalculation: "WHEN_REQUIRED" });
    expect((await listParts(uploadId)).Parts).toMatchObject([{ PartNumber: 1, ETag: first.ETag }]);
    const last = await uploadPart(uploadId, 2, LAST);
    await complete(uploadId, [first, last]);
    expect((await bytes()).equals(Buffer.concat([FIRST, LAST]))).toBe(true);
  });

  test("can be completed once more, when the answer got lost", async () => {
    const uploadId = await begin();
    const parts = await uploadThreeParts(uploadId);
    const [one, two] = await Promise.all([complete(uploadId, parts), complete(uploadId, parts)]);
    expect(two.ETag).toBe(one.ETag);
    expect((await complete(uploadId, parts)).ETag).toBe(one.ETag);
    await expect(complete(uploadId, parts.slice(0, 1))).rejects.toEqual(failure("NoSuchUpload", 404));
    await s3.send(new DeleteObjectCommand({ Bucket: PRIVATE, Key: "scan" }));
    await expect(complete(uploadId, parts)).rejects.toEqual(failure("NoSuchUpload", 404));
  });

  test("leaves nothing behind when it is given up", async () => {
    const uploadId = await begin();
    await uploadPart(uploadId, 1, LAST);
    const abort = new AbortMultipartUploadCommand({ Bucket: PRIVATE, Key: "scan", UploadId: uploadId });
    await s3.send(abort);
    expect(await storage.files()).toEqual([]);
    await expect(uploadPart(uploadId, 2, LAST)).rejects.toEqual(failure("NoSuchUpload", 404));
    await expect(listParts(uploadId)).rejects.toEqual(failure("NoSuchUpload", 404));
    await expect(s3.send(abort)).rejects.toEqual(failure("NoSuchUpload", 404));
    expect(await storage.files()).toEqual([]);
  });

  test("of another key is not known by its id alone", async () => {
    const uploadId = await begin("theirs");
    await expect(uploadPart(uploadId, 1, LAST, { Key: "mine" })).rejects.toEqual(
      failure("NoSuchUpload", 404),
    );
    await expect(complete(uploadId, [{ PartNumber: 1, ETag: "x" }])).rejects.toEqual(
      failure("NoSuchUpload", 404),
    );
  });

  test("does not overwrite what must not be there", async () => {
    const uploadId = await begin();
    const parts = [await uploadPart(uploadId, 1, LAST)];
    await s3.send(new PutObjectCommand({ Bucket: PRIVATE, Key: "scan", Body: "first" }));
    await expect(complete(uploadId, parts, { IfNoneMatch: "*" })).rejects.toEqual(
      failure("PreconditionFailed", 412),
    );
    expect((await bytes()).toString()).toBe("first");
    await s3.send(new DeleteObjectCommand({ Bucket: PRIVATE, Key: "scan" }));
    await complete(uploadId, parts, { IfNoneMatch: "*" });
    expect((await bytes()).equals(LAST)).toBe(true);
  });
});

describe("a completion is refused", () => {
  let uploadId: string;
  let small: CompletedPart;
  let last: CompletedPart;
  beforeEach(async () => {
    uploadId = await begin();
    small = await uploadPart(uploadId, 1, Buffer.alloc(MINIMUM - 1));
    last = await uploadPart(uploadId, 2, LAST);
  });
  afterEach(async () => {
    await expect(head()).rejects.toEqual(failure("NotFound", 404));
    expect((await listParts(uploadId)).Parts).toHaveLength(2);
  });

  test("with a small part that is not the last", async () => {
    await expect(complete(uploadId, [small, last])).rejects.toMatchObject({
      name: "EntityTooSmall",
      $metadata: { httpStatusCode: 400 },
      MinSizeAllowed: String(MINIMUM),
      PartNumber: "1",
    });
  });
  test("with parts out of order", async () => {
    await expect(complete(uploadId, [last, small])).rejects.toEqual(failure("InvalidPartOrder", 400));
    await expect(complete(uploadId, [last, last])).rejects.toEqual(failure("InvalidPartOrder", 400));
  });
  test("with a part that never came, or another than came", async () => {
    await expect(complete(uploadId, [last, { PartNumber: 3, ETag: last.ETag }])).rejects.toEqual(
      failure("InvalidPart", 400),
    );
    await expect(complete(uploadId, [{ PartNumber: 2, ETag: small.ETag }])).rejects.toEqual(
      failure("InvalidPart", 400),
    );
  });
  test("without parts, or with a document that is none", async () => {
    await expect(complete(uploadId, [])).rejects.toEqual(failure("MalformedXML", 400));
    const command = new CompleteMultipartUploadCommand({ Bucket: PRIVATE, Key: "scan", UploadId: uploadId });
    const url = await getSignedUrl(s3, command);
    for (const body of [
      "",
      "<CompleteMultipartUpload>",
      "<Other/>",
      "<CompleteMultipartUpload><Part/></CompleteMultipartUpload>",
    ]) {
      expect(await send(url, { method: "POST", body })).toMatchObject({ status: 400, code: "MalformedXML" });
    }
  });
  test("when the whole has another size than was said", async () => {
    await expect(complete(uploadId, [last], { MpuObjectSize: LAST.length + 1 })).rejects.toEqual(
      failure("InvalidRequest", 400),
    );
  });
});

test.each([0, 10_001, "x"])("part number %s is refused", async (number) => {
  const uploadId = await begin();
  const command = new UploadPartCommand({ Bucket: PRIVATE, Key: "scan", UploadId: uploadId, PartNumber: 1 });
  command.middlewareStack.add(
    (next) => (args) => {
      (args.request as { query: Record<string, string> }).query.partNumber = String(number);
      return next(args);
    },
    { step: "build" },
  );
  await expect(s3.send(command)).rejects.toEqual(failure("InvalidArgument", 400));
});

describe("checksums of an upload in parts", () => {
  const sha256 = (data: Buffer) => createHash("sha256").update(data).digest();

  test("a composite one is of the parts' own", async () => {
    const uploadId = await begin("scan", { ChecksumAlgorithm: "SHA256" });
    const more = { ChecksumAlgorithm: "SHA256" } as const;
    const parts = [await uploadPart(uploadId, 1, FIRST, more), await uploadPart(uploadId, 2, LAST, more)];
    expect(parts[0]?.ChecksumSHA256).toBe(sha256(FIRST).toString("base64"));
    const bare = parts.map(({ PartNumber, ETag }) => ({ PartNumber, ETag }));
    await expect(complete(uploadId, bare)).rejects.toEqual(failure("InvalidRequest", 400));

    const expected = `${sha256(Buffer.concat([sha256(FIRST), sha256(LAST)])).toString("base64")}-2`;
    expect(await complete(uploadId, parts)).toMatchObject({
      ChecksumSHA256: expected,
      ChecksumType: "COMPOSITE",
    });
    expect(await head({ ChecksumMode: "ENABLED" })).toMatchObject({
      ChecksumSHA256: expected,
      ChecksumType: "COMPOSITE",
    });
    expect((await bytes("scan", { ChecksumMode: "ENABLED" })).length).toBe(FIRST.length + LAST.length);
  });

  test("a full one is of the bytes, is checked by the reader, and needs none of the parts", async () => {
    const uploadId = await begin("scan", { ChecksumAlgorithm: "CRC64NVME" });
    const parts = [await uploadPart(uploadId, 1, FIRST), await uploadPart(uploadId, 2, LAST)];
    await expect(complete(uploadId, parts, { ChecksumCRC64NVME: "AAAAAAAAAAA=" })).rejects.toEqual(
      failure("BadDigest", 400),
    );
    await expect(complete(uploadId, parts, { ChecksumCRC32: "AAAAAA==" })).rejects.toEqual(
      failure("InvalidRequest", 400),
    );
    const crc = createCrc("crc64nvme");
    crc.update(FIRST);
    crc.update(LAST);
    const expected = crc.digest().toString("base64");
    expect(await complete(uploadId, parts, { ChecksumCRC64NVME: expected })).toMatchObject({
      ChecksumCRC64NVME: expected,
      ChecksumType: "FULL_OBJECT",
    });
    expect((await bytes("scan", { ChecksumMode: "ENABLED" })).equals(Buffer.concat([FIRST, LAST]))).toBe(
      true,
    );
  });

  test("the SDK's own default works from beginning to end", async () => {
    const client = storage.client();
    const uploadId = await begin("scan", {}, client);
    const parts = [
      await uploadPart(uploadId, 1, FIRST, { client }),
      await uploadPart(uploadId, 2, LAST, { client }),
    ];
    expect(parts[0]?.ChecksumCRC32).toBeDefined();
    const other = { ...parts[0], ChecksumCRC32: parts[1]?.ChecksumCRC32 };
    await expect(complete(uploadId, [other], {}, client)).rejects.toEqual(failure("InvalidPart", 400));
    await complete(uploadId, parts, {}, client);
    expect((await bytes()).equals(Buffer.concat([FIRST, LAST]))).toBe(true);
  });

  test("parts of another kind than the upload was begun for are refused", async () => {
    const withSha = await begin("scan", { ChecksumAlgorithm: "SHA256" });
    await expect(uploadPart(withSha, 1, LAST, { ChecksumAlgorithm: "CRC32" })).rejects.toEqual(
      failure("InvalidRequest", 400),
    );
    await expect(uploadPart(withSha, 1, LAST)).rejects.toEqual(failure("InvalidRequest", 400));
    await expect(begin("scan", { ChecksumAlgorithm: "SHA256", ChecksumType: "FULL_OBJECT" })).rejects.toEqual(
      failure("InvalidRequest", 400),
    );
    expect((await storage.files()).filter((file) => file.endsWith(".data"))).toEqual([]);
  });
});

test("a browser uploads in parts by presigned addresses, and reads each ETag", async () => {
  const uploadId = await begin();
  const parts: CompletedPart[] = [];
  for (const [index, body] of [FIRST, LAST].entries()) {
    const PartNumber = index + 1;
    const command = new UploadPartCommand({ Bucket: PRIVATE, Key: "scan", UploadId: uploadId, PartNumber });
    const url = await getSignedUrl(s3, command);
    const answer = await send(url, {
      method: "PUT",
      body,
      headers: { origin: ORIGIN, "content-type": "image/tiff" },
    });
    expect(answer.status).toBe(200);
    expect(answer.headers["access-control-allow-origin"]).toBe(ORIGIN);
    expect(answer.headers["access-control-expose-headers"]).toContain("ETag");
    parts.push({ PartNumber, ETag: answer.headers.etag });
    const moved = url.replace(`partNumber=${PartNumber}`, "partNumber=9");
    expect(await send(moved, { method: "PUT", body })).toMatchObject({
      status: 403,
      code: "SignatureDoesNotMatch",
    });
  }
  await complete(uploadId, parts);
  expect((await bytes()).equals(Buffer.concat([FIRST, LAST]))).toBe(true);
});

describe("uploads under way", () => {
  const list = (more: object = {}) => s3.send(new ListMultipartUploadsCommand({ Bucket: PRIVATE, ...more }));

  test("are listed by key, then as they began, in pages", async () => {
    const ids: Record<string, string> = {};
    for (const name of ["b", "a/2", "a/1"]) ids[name] = await begin(name);
    const again = await begin("a/1");
    const all = await list();
    expect(all.Uploads?.map((upload) => [upload.Key, upload.UploadId])).toEqual([
      ...[ids["a/1"], again].sort().map((id) => ["a/1", id]),
      ["a/2", ids["a/2"]],
      ["b", ids.b],
    ]);
    expect(all.Uploads?.[0]?.Initiated).toBeInstanceOf(Date);

    const page = await list({ MaxUploads: 1 });
    expect(page).toMatchObject({ IsTruncated: true, NextKeyMarker: "a/1" });
    const rest = await list({ KeyMarker: page.NextKeyMarker, UploadIdMarker: page.NextUploadIdMarker });
    expect(rest.Uploads?.map((upload) => upload.Key)).toEqual(["a/1", "a/2", "b"]);
    expect((await list({ KeyMarker: "a/1" })).Uploads?.map((upload) => upload.Key)).toEqual(["a/2", "b"]);
    expect((await list({ Prefix: "a/" })).Uploads).toHaveLength(3);
    const grouped = await list({ Delimiter: "/" });
    expect(grouped.CommonPrefixes).toEqual([{ Prefix: "a/" }]);
    expect(grouped.Uploads?.map((upload) => upload.Key)).toEqual(["b"]);
    expect((await s3.send(new ListObjectsV2Command({ Bucket: PRIVATE }))).KeyCount).toBe(0);
  });
});

describe("copies", () => {
  test("of an object in parts become one whole, with the ETag of its bytes", async () => {
    const uploadId = await begin();
    await complete(uploadId, await uploadThreeParts(uploadId));
    const answer = await s3.send(
      new CopyObjectCommand({ Bucket: PRIVATE, Key: "copy", CopySource: `${PRIVATE}/scan` }),
    );
    expect(answer.CopyObjectResult?.ETag).toBe(`"${md5(WHOLE).toString("hex")}"`);
    expect((await bytes("copy")).equals(WHOLE)).toBe(true);
  });

  test("of a range of an object can be parts", async () => {
    await s3.send(new PutObjectCommand({ Bucket: PRIVATE, Key: "source", Body: WHOLE }));
    const uploadId = await begin();
    const copyPart = (PartNumber: number, CopySourceRange?: string) =>
      s3.send(
        new UploadPartCopyCommand({
          Bucket: PRIVATE,
          Key: "scan",
          UploadId: uploadId,
          PartNumber,
          CopySource: `${PRIVATE}/source`,
          CopySourceRange,
        }),
      );
    await expect(copyPart(1, `bytes=${WHOLE.length}-`)).rejects.toEqual(failure("InvalidArgument", 400));
    const first = await copyPart(1);
    const second = await copyPart(2, "bytes=10-19");
    await complete(uploadId, [
      { PartNumber: 1, ETag: first.CopyPartResult?.ETag },
      { PartNumber: 2, ETag: second.CopyPartResult?.ETag },
    ]);
    expect((await bytes()).equals(Buffer.concat([WHOLE, WHOLE.subarray(10, 20)]))).toBe(true);
  });
});

test("what a crash can leave behind is removed at the next start, and nothing else", async () => {
  const uploadId = await begin("under way");
  await uploadPart(uploadId, 1, LAST, { Key: "under way" });
  await s3.send(new PutObjectCommand({ Bucket: PRIVATE, Key: "kept", Body: "text" }));
  const before = (await storage.files()).sort();
  const [document = ""] = before.filter((file) => /\/objects\/.*\.json$/.test(file));

  await storage.stop();
  const upload = join(storage.folder, "buckets", PRIVATE, "uploads", uploadId);
  await writeFile(join(storage.folder, "tmp", "half-written"), "x");
  await writeFile(document.replace(".json", ".orphan-1.data"), "x");
  await writeFile(join(upload, "1.orphan.data"), "x");
  await storage.start();
  s3 = storage.client({ requestChecksumCalculation: "WHEN_REQUIRED" });

  expect((await storage.files()).sort()).toEqual(before);
  expect((await bytes("kept")).toString()).toBe("text");
});

test("a damaged document costs its own object only, and is reported", async () => {
  await s3.send(new PutObjectCommand({ Bucket: PRIVATE, Key: "broken", Body: "text" }));
  const [document = ""] = (await storage.files()).filter((file) => file.endsWith(".json"));
  await s3.send(new PutObjectCommand({ Bucket: PRIVATE, Key: "kept", Body: "text" }));
  await storage.stop();
  await writeFile(document, "{");
  await storage.start();
  s3 = storage.client();
  const { Contents } = await s3.send(new ListObjectsV2Command({ Bucket: PRIVATE }));
  expect(Contents?.map((entry) => entry.Key)).toEqual(["kept"]);
  expect(storage.faults.splice(0)).toMatchObject([{ message: expect.stringContaining("damaged") }]);
  expect((await storage.files()).filter((file) => file.endsWith(".data"))).toHaveLength(2);
});
