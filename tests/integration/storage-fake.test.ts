import { createHash, randomBytes } from "node:crypto";
import { readFile } from "node:fs/promises";
import { connect } from "node:net";
import { dirname, join } from "node:path";
import { Readable } from "node:stream";
import {
  ChecksumAlgorithm,
  CopyObjectCommand,
  DeleteObjectCommand,
  DeleteObjectsCommand,
  GetBucketLocationCommand,
  GetObjectCommand,
  HeadBucketCommand,
  HeadObjectCommand,
  ListBucketsCommand,
  ListObjectsV2Command,
  PutObjectCommand,
  PutObjectTaggingCommand,
  paginateListObjectsV2,
  type S3Client,
} from "@aws-sdk/client-s3";
import { afterEach, beforeEach, describe, expect, test } from "vitest";
import { ORIGIN, PRIVATE, PUBLIC, REGION, send, TestStorage } from "../support/storage-server";

let storage: TestStorage;
let s3: S3Client;

beforeEach(async () => {
  storage = await TestStorage.open();
  s3 = storage.client();
});
afterEach(() => storage.dispose());

const put = (key: string, body: string | Buffer, more: object = {}, bucket = PRIVATE) =>
  s3.send(new PutObjectCommand({ Bucket: bucket, Key: key, Body: body, ...more }));
const get = (key: string, more: object = {}, bucket = PRIVATE) =>
  s3.send(new GetObjectCommand({ Bucket: bucket, Key: key, ...more }));
const head = (key: string, more: object = {}) =>
  s3.send(new HeadObjectCommand({ Bucket: PRIVATE, Key: key, ...more }));
const text = async (key: string, more: object = {}, bucket = PRIVATE) =>
  (await get(key, more, bucket)).Body?.transformToString();
const md5 = (data: string | Buffer) => createHash("md5").update(data).digest("hex");
const failure = (name: string, status: number) =>
  expect.objectContaining({ name, $metadata: expect.objectContaining({ httpStatusCode: status }) });

describe("an object", () => {
  test("comes back with its bytes and everything that was said about it", async () => {
    const body = randomBytes(70_000);
    const answer = await put("rolls/12/scan.tif", body, {
      ContentType: "image/tiff",
      CacheControl: "private, max-age=60",
      ContentDisposition: "attachment; filename*=UTF-8''M%C3%BChle.tif",
      ContentLanguage: "de",
      Metadata: { frame: "12a", note: "first light" },
    });
    expect(answer.ETag).toBe(`"${md5(body)}"`);

    const got = await get("rolls/12/scan.tif");
    expect(Buffer.from((await got.Body?.transformToByteArray()) ?? []).equals(body)).toBe(true);
    const expected = {
      ContentLength: body.length,
      ContentType: "image/tiff",
      CacheControl: "private, max-age=60",
      ContentDisposition: "attachment; filename*=UTF-8''M%C3%BChle.tif",
      ContentLanguage: "de",
      Metadata: { frame: "12a", note: "first light" },
      ETag: answer.ETag,
      AcceptRanges: "bytes",
    };
    expect(got).toMatchObject(expected);
    expect(await head("rolls/12/scan.tif")).toMatchObject(expected);
    expect(got.LastModified?.getTime()).toBeGreaterThan(Date.now() - 60_000);
  });

  test("is replaced as a whole by the next PUT, and gone after DELETE", async () => {
    await put("note", "a long first text", { Metadata: { version: "1" } });
    await put("note", "second");
    expect(await text("note")).toBe("second");
    expect((await head("note")).Metadata).toEqual({});

    await s3.send(new DeleteObjectCommand({ Bucket: PRIVATE, Key: "note" }));
    await expect(get("note")).rejects.toEqual(failure("NoSuchKey", 404));
    await expect(head("note")).rejects.toEqual(failure("NotFound", 404));
    await s3.send(new DeleteObjectCommand({ Bucket: PRIVATE, Key: "note" }));
    expect((await storage.files()).filter((file) => /\.(data|json)$/.test(file))).toEqual([]);
  });

  test("may be empty", async () => {
    await put("empty", "");
    const got = await get("empty");
    expect(got.ContentLength).toBe(0);
    expect(await got.Body?.transformToString()).toBe("");
  });

  test("may have any key, none of which leads out of the folder", async () => {
    const keys = [
      "with space.txt",
      "Mühle & Söhne.txt",
      "a+b=c.txt",
      "(round) [square] {curly}.txt",
      "../../../escape.txt",
      "a/../b/./c",
      "..",
      "/leading//double/",
      "100%25%.txt",
      "quote'\"<>\\.txt",
      "film \u{1f39e}.txt",
      "-/health",
      "k".repeat(1024),
    ];
    const before = await storage.files();
    for (const key of keys) await put(key, `text of ${key}`);
    for (const key of keys) expect(await text(key)).toBe(`text of ${key}`);

    const listed = await s3.send(new ListObjectsV2Command({ Bucket: PRIVATE }));
    expect(listed.Contents?.map((entry) => entry.Key)).toEqual(
      [...keys].sort((a, b) => Buffer.compare(Buffer.from(a), Buffer.from(b))),
    );
    const added = (await storage.files()).filter((file) => !before.includes(file));
    const folders = new Set(added.map((file) => dirname(dirname(file))));
    expect([...folders]).toEqual([join(storage.folder, "buckets", PRIVATE, "objects")]);

    await s3.send(
      new DeleteObjectsCommand({ Bucket: PRIVATE, Delete: { Objects: keys.map((Key) => ({ Key })) } }),
    );
    expect((await s3.send(new ListObjectsV2Command({ Bucket: PRIVATE }))).KeyCount).toBe(0);
  });

  test("of too long a key, too much metadata or with wishes that cannot be met is refused", async () => {
    await expect(put("k".repeat(1025), "x")).rejects.toEqual(failure("KeyTooLongError", 400));
    await expect(put("x", "x", { Metadata: { long: "x".repeat(3000) } })).rejects.toEqual(
      failure("MetadataTooLarge", 400),
    );
    await expect(put("x", "x", { ACL: "public-read" })).rejects.toEqual(
      failure("AccessControlListNotSupported", 400),
    );
    await expect(put("x", "x", { Tagging: "a=b" })).rejects.toEqual(failure("NotImplemented", 501));
    await expect(put("x", "x", { StorageClass: "GLACIER" })).rejects.toEqual(
      failure("InvalidStorageClass", 400),
    );
    const tagging = new PutObjectTaggingCommand({ Bucket: PRIVATE, Key: "x", Tagging: { TagSet: [] } });
    await expect(s3.send(tagging)).rejects.toEqual(failure("NotImplemented", 501));
    await expect(put("x", "x", {}, "no-such-bucket")).rejects.toEqual(failure("NoSuchBucket", 404));
    expect((await s3.send(new ListObjectsV2Command({ Bucket: PRIVATE }))).KeyCount).toBe(0);
  });
});

test("the buckets are there, with their region", async () => {
  const { Buckets } = await s3.send(new ListBucketsCommand({}));
  expect(Buckets?.map((bucket) => bucket.Name)).toEqual([PRIVATE, PUBLIC]);
  await s3.send(new HeadBucketCommand({ Bucket: PRIVATE }));
  await expect(s3.send(new HeadBucketCommand({ Bucket: "other-bucket" }))).rejects.toEqual(
    failure("NotFound", 404),
  );
  const location = await s3.send(new GetBucketLocationCommand({ Bucket: PRIVATE }));
  expect(location.LocationConstraint).toBe(REGION);
});

describe("checksums", () => {
  const algorithms = [
    ChecksumAlgorithm.CRC32,
    ChecksumAlgorithm.CRC32C,
    ChecksumAlgorithm.CRC64NVME,
    ChecksumAlgorithm.SHA1,
    ChecksumAlgorithm.SHA256,
  ];

  test.each(algorithms)(
    "%s is taken with a body and with a stream, kept, and checked by the reader",
    async (name) => {
      const field = `Checksum${name}` as const;
      const body = randomBytes(200_000);
      const whole = await put("whole", body, { ChecksumAlgorithm: name });
      const stream = Readable.from([body.subarray(0, 65_536), body.subarray(65_536)]);
      const streamed = await s3.send(
        new PutObjectCommand({
          Bucket: PRIVATE,
          Key: "streamed",
          Body: stream,
          ContentLength: body.length,
          ContentEncoding: "identity",
          ChecksumAlgorithm: name,
        }),
      );
      expect(streamed[field]).toBe(whole[field]);
      expect(whole[field]).toMatch(/=$|^[\w+/]+$/);
      expect(streamed.ETag).toBe(`"${md5(body)}"`);

      // The reader compares the bytes with the header itself, and fails when they differ.
      const got = await get("streamed");
      expect(got).toMatchObject({
        [field]: whole[field],
        ChecksumType: "FULL_OBJECT",
        ContentEncoding: "identity",
      });
      expect(Buffer.from((await got.Body?.transformToByteArray()) ?? []).equals(body)).toBe(true);
      expect((await get("streamed", { Range: "bytes=0-9" }))[field]).toBeUndefined();
    },
  );

  test.each([
    ["Content-MD5", { ContentMD5: createHash("md5").update("other").digest("base64") }, "BadDigest"],
    ["a CRC-32", { ChecksumCRC32: "AAAAAA==" }, "BadDigest"],
    ["a SHA-256", { ChecksumSHA256: createHash("sha256").update("other").digest("base64") }, "BadDigest"],
    ["a Content-MD5 that is none", { ContentMD5: "short" }, "InvalidDigest"],
    ["a CRC-32 that is none", { ChecksumCRC32: "short" }, "InvalidRequest"],
    ["two checksums", { ChecksumCRC32: "AAAAAA==", ChecksumCRC32C: "AAAAAA==" }, "InvalidRequest"],
  ])("%s that is not the body's refuses the object", async (_name, wrong, code) => {
    await put("kept", "what was there");
    await expect(put("kept", "body", wrong)).rejects.toEqual(failure(code, 400));
    expect(await text("kept")).toBe("what was there");
    expect(await storage.temporaryFiles()).toEqual([]);
  });

  test("a stream in small pieces is refused, as S3 does", async () => {
    const stream = Readable.from([Buffer.alloc(100), Buffer.alloc(100)]);
    const command = new PutObjectCommand({ Bucket: PRIVATE, Key: "x", Body: stream, ContentLength: 200 });
    await expect(s3.send(command)).rejects.toEqual(failure("InvalidChunkSizeError", 403));
  });

  test("a stream of another length than was said is refused", async () => {
    const stream = Readable.from([Buffer.alloc(9000)]);
    const command = new PutObjectCommand({ Bucket: PRIVATE, Key: "x", Body: stream, ContentLength: 9001 });
    await expect(s3.send(command)).rejects.toEqual(failure("IncompleteBody", 400));
    await expect(head("x")).rejects.toEqual(failure("NotFound", 404));
  });
});

describe("reading a part of an object, or only when it has changed", () => {
  beforeEach(() => put("alphabet", "abcdefghijklmnopqrstuvwxyz", { ContentType: "text/plain" }));

  test.each([
    ["bytes=0-3", "abcd", "bytes 0-3/26"],
    ["bytes=23-", "xyz", "bytes 23-25/26"],
    ["bytes=-2", "yz", "bytes 24-25/26"],
    ["bytes=20-999", "uvwxyz", "bytes 20-25/26"],
  ])("%s", async (Range, expected, contentRange) => {
    const got = await get("alphabet", { Range });
    expect(got.$metadata.httpStatusCode).toBe(206);
    expect(got).toMatchObject({ ContentRange: contentRange, ContentLength: expected.length });
    expect(await got.Body?.transformToString()).toBe(expected);
  });

  test("a range outside is 416 and says the size", async () => {
    await expect(get("alphabet", { Range: "bytes=26-" })).rejects.toEqual(failure("InvalidRange", 416));
    await put("alphabet", "abc", {}, PUBLIC);
    const answer = await send(`${storage.url}/${PUBLIC}/alphabet`, { headers: { range: "bytes=3-" } });
    expect(answer).toMatchObject({ status: 416, code: "InvalidRange" });
    expect(answer.headers["content-range"]).toBe("bytes */3");
  });

  test("If-Range gives the range of the same object and all of another", async () => {
    const { ETag = "" } = await put("open", "abc", {}, PUBLIC);
    const url = `${storage.url}/${PUBLIC}/open`;
    const same = await send(url, { headers: { range: "bytes=1-1", "if-range": ETag } });
    expect([same.status, same.body.toString()]).toEqual([206, "b"]);
    const other = await send(url, { headers: { range: "bytes=1-1", "if-range": '"other"' } });
    expect([other.status, other.body.toString()]).toEqual([200, "abc"]);
  });

  test("conditions", async () => {
    const { ETag, LastModified } = await head("alphabet");
    const before = new Date((LastModified?.getTime() ?? 0) - 1000);
    const status = (more: object) =>
      get("alphabet", more).then(
        (got) => got.$metadata.httpStatusCode,
        (error) => error.$metadata.httpStatusCode,
      );
    expect(await status({ IfNoneMatch: ETag })).toBe(304);
    expect(await status({ IfNoneMatch: '"other"' })).toBe(200);
    expect(await status({ IfMatch: ETag })).toBe(200);
    expect(await status({ IfMatch: '"other"' })).toBe(412);
    expect(await status({ IfModifiedSince: LastModified })).toBe(304);
    expect(await status({ IfModifiedSince: before })).toBe(200);
    expect(await status({ IfUnmodifiedSince: before })).toBe(412);
  });

  test("headers of the answer can be chosen by whoever signs", async () => {
    const got = await get("alphabet", {
      ResponseContentType: "application/octet-stream",
      ResponseContentDisposition: 'attachment; filename="a.txt"',
      ResponseCacheControl: "no-store",
    });
    expect(got).toMatchObject({
      ContentType: "application/octet-stream",
      ContentDisposition: 'attachment; filename="a.txt"',
      CacheControl: "no-store",
    });
    await expect(get("alphabet", { ResponseContentType: "a\r\nx-evil: 1" })).rejects.toEqual(
      failure("InvalidArgument", 400),
    );
  });
});

describe("listing", () => {
  const keys = ["a/1", "a/2", "a/3", "b", "c/x/1", "c/y", "d e+f", "ü"];
  beforeEach(async () => {
    for (const key of [...keys].reverse()) await put(key, key);
  });
  const list = (more: object) => s3.send(new ListObjectsV2Command({ Bucket: PRIVATE, ...more }));
  const shown = (page: { Contents?: { Key?: string }[]; CommonPrefixes?: { Prefix?: string }[] }) => [
    ...(page.Contents ?? []).map((entry) => entry.Key),
    ...(page.CommonPrefixes ?? []).map((entry) => `${entry.Prefix}…`),
  ];

  test("gives each key in order with its size, tag and time", async () => {
    const page = await list({});
    expect(shown(page)).toEqual(keys);
    expect(page).toMatchObject({ Name: PRIVATE, KeyCount: 8, MaxKeys: 1000, IsTruncated: false });
    expect(page.Contents?.[0]).toMatchObject({ Key: "a/1", Size: 3, ETag: `"${md5("a/1")}"` });
    expect(page.Contents?.[0]?.LastModified).toBeInstanceOf(Date);
  });

  test("by prefix and delimiter", async () => {
    expect(shown(await list({ Prefix: "a/" }))).toEqual(["a/1", "a/2", "a/3"]);
    expect(shown(await list({ Delimiter: "/" }))).toEqual(["b", "d e+f", "ü", "a/…", "c/…"]);
    expect(shown(await list({ Prefix: "c/", Delimiter: "/" }))).toEqual(["c/y", "c/x/…"]);
    expect(shown(await list({ Prefix: "nothing" }))).toEqual([]);
    expect(shown(await list({ StartAfter: "c/x/1" }))).toEqual(["c/y", "d e+f", "ü"]);
  });

  test("in pages", async () => {
    const pages: unknown[] = [];
    const config = { client: s3, pageSize: 2 };
    for await (const page of paginateListObjectsV2(config, { Bucket: PRIVATE, Delimiter: "/" })) {
      pages.push(shown(page));
    }
    expect(pages).toEqual([["b", "a/…"], ["d e+f", "c/…"], ["ü"]]);
    expect(await list({ MaxKeys: 0 })).toMatchObject({ KeyCount: 0, IsTruncated: false });
    await expect(list({ ContinuationToken: "made up" })).rejects.toEqual(failure("InvalidArgument", 400));
  });

  test("encoded for what XML cannot hold", async () => {
    await put("bell \u0007", "x");
    expect(shown(await list({ Prefix: "bell", EncodingType: "url" }))).toEqual(["bell%20%07"]);
    expect(shown(await list({ Prefix: "d e", EncodingType: "url" }))).toEqual(["d%20e%2Bf"]);
  });
});

describe("deleting several", () => {
  test("says which went, also which were not there, and deletes nothing else", async () => {
    for (const key of ["one", "two", " three ", "kept"]) await put(key, key);
    const objects = ["one", "two", " three ", "never"].map((Key) => ({ Key }));
    const answer = await s3.send(new DeleteObjectsCommand({ Bucket: PRIVATE, Delete: { Objects: objects } }));
    expect(answer.Deleted?.map((deleted) => deleted.Key)).toEqual(["one", "two", " three ", "never"]);
    const { Contents } = await s3.send(new ListObjectsV2Command({ Bucket: PRIVATE }));
    expect(Contents?.map((entry) => entry.Key)).toEqual(["kept"]);
  });

  test("quietly, and only what still has the named tag", async () => {
    const { ETag } = await put("one", "1");
    await put("two", "2");
    const answer = await s3.send(
      new DeleteObjectsCommand({
        Bucket: PRIVATE,
        Delete: {
          Quiet: true,
          Objects: [
            { Key: "one", ETag },
            { Key: "two", ETag },
          ],
        },
      }),
    );
    expect(answer.Deleted).toBeUndefined();
    expect(answer.Errors).toMatchObject([{ Key: "two", Code: "PreconditionFailed" }]);
    await expect(head("one")).rejects.toEqual(failure("NotFound", 404));
    expect(await text("two")).toBe("2");
  });

  test("is refused without a checksum of the list", async () => {
    const unchecked = storage.client({ requestChecksumCalculation: "WHEN_REQUIRED" });
    unchecked.middlewareStack.add(
      (next) => (args) => {
        const request = args.request as { headers: Record<string, string> };
        for (const name of Object.keys(request.headers)) {
          if (/^(x-amz-(sdk-)?checksum|content-md5)/.test(name)) delete request.headers[name];
        }
        return next(args);
      },
      { step: "build", priority: "low" },
    );
    const command = new DeleteObjectsCommand({ Bucket: PRIVATE, Delete: { Objects: [{ Key: "one" }] } });
    await expect(unchecked.send(command)).rejects.toEqual(failure("InvalidRequest", 400));
  });
});

describe("copying", () => {
  const copy = (source: string, key: string, more: object = {}, bucket = PUBLIC) =>
    s3.send(new CopyObjectCommand({ Bucket: bucket, Key: key, CopySource: source, ...more }));

  test("publishes a proof: private to public, with headers of its own", async () => {
    const body = randomBytes(50_000);
    const { ETag } = await put("proofs/1 ü+.avif", body, {
      ContentType: "image/avif",
      Metadata: { frame: "1" },
    });
    const answer = await copy(`${PRIVATE}/${encodeURIComponent("proofs/1 ü+.avif")}`, "p/abc.avif", {
      MetadataDirective: "REPLACE",
      ContentType: "image/avif",
      CacheControl: "public, max-age=31536000, immutable",
    });
    expect(answer.CopyObjectResult?.ETag).toBe(ETag);

    await s3.send(new DeleteObjectCommand({ Bucket: PRIVATE, Key: "proofs/1 ü+.avif" }));
    const open = await fetch(`${storage.url}/${PUBLIC}/p/abc.avif`);
    expect(open.status).toBe(200);
    expect(open.headers.get("content-type")).toBe("image/avif");
    expect(open.headers.get("cache-control")).toBe("public, max-age=31536000, immutable");
    expect(open.headers.get("x-amz-meta-frame")).toBeNull();
    expect(Buffer.from(await open.arrayBuffer()).equals(body)).toBe(true);
  });

  test("keeps what was said about the source unless told otherwise", async () => {
    await put("from", "text", { ContentType: "text/plain", CacheControl: "no-cache", Metadata: { a: "b" } });
    await copy(`/${PRIVATE}/from`, "to", { ContentType: "ignored/type" }, PRIVATE);
    expect(await head("to", { ChecksumMode: "ENABLED" })).toMatchObject({
      ContentType: "text/plain",
      CacheControl: "no-cache",
      Metadata: { a: "b" },
    });
    expect(await text("to")).toBe("text");
  });

  test("takes another checksum when asked for", async () => {
    const { ChecksumSHA256 } = await put("sha", "text", { ChecksumAlgorithm: "SHA256" });
    await put("crc", "text", { ChecksumAlgorithm: "CRC32" });
    await copy(`${PRIVATE}/crc`, "copied", { ChecksumAlgorithm: "SHA256" }, PRIVATE);
    expect((await head("copied", { ChecksumMode: "ENABLED" })).ChecksumSHA256).toBe(ChecksumSHA256);
  });

  test("onto itself only with new metadata", async () => {
    await put("self", "text");
    await expect(copy(`${PRIVATE}/self`, "self", {}, PRIVATE)).rejects.toEqual(
      failure("InvalidRequest", 400),
    );
    const more = { MetadataDirective: "REPLACE", ContentType: "text/plain" };
    await copy(`${PRIVATE}/self`, "self", more, PRIVATE);
    expect(await head("self")).toMatchObject({ ContentType: "text/plain", ContentLength: 4 });
    expect(await text("self")).toBe("text");
  });

  test("of what is not there, or has changed, is refused", async () => {
    await put("from", "text");
    await expect(copy(`${PRIVATE}/nothing`, "to")).rejects.toEqual(failure("NoSuchKey", 404));
    await expect(copy("no-such-bucket/from", "to")).rejects.toEqual(failure("NoSuchBucket", 404));
    await expect(copy("nonsense", "to")).rejects.toEqual(failure("InvalidArgument", 400));
    await expect(copy(`${PRIVATE}/from`, "to", { CopySourceIfMatch: '"other"' })).rejects.toEqual(
      failure("PreconditionFailed", 412),
    );
    expect((await s3.send(new ListObjectsV2Command({ Bucket: PUBLIC }))).KeyCount).toBe(0);
  });
});

describe("several writers of one key", () => {
  test("leave the object of one of them, whole, and no other file", async () => {
    const bodies = Array.from({ length: 12 }, (_, index) =>
      Buffer.alloc(300_000 + index, `writer ${index} `),
    );
    const answers = await Promise.all(
      bodies.map((body, index) => put("contested", body, { Metadata: { writer: String(index) } })),
    );
    const got = await get("contested");
    const writer = Number(got.Metadata?.writer);
    expect(got.ETag).toBe(answers[writer]?.ETag);
    expect(
      Buffer.from((await got.Body?.transformToByteArray()) ?? []).equals(bodies[writer] ?? Buffer.of()),
    ).toBe(true);
    expect((await storage.files()).filter((file) => file.endsWith(".data"))).toHaveLength(1);
    expect(await storage.temporaryFiles()).toEqual([]);
  });

  test("who demand that there be none: one gets it", async () => {
    const results = await Promise.allSettled(
      Array.from({ length: 10 }, (_, index) => put("once", `writer ${index}`, { IfNoneMatch: "*" })),
    );
    const winners = results.flatMap((result, index) => (result.status === "fulfilled" ? [index] : []));
    expect(winners).toHaveLength(1);
    expect(await text("once")).toBe(`writer ${winners[0]}`);
    const refusals = results.filter((result) => result.status === "rejected").map((result) => result.reason);
    expect(refusals).toEqual(Array.from({ length: 9 }, () => failure("PreconditionFailed", 412)));
    expect(await storage.temporaryFiles()).toEqual([]);
  });

  test("who replace only what they have seen", async () => {
    await expect(put("seen", "x", { IfMatch: '"any"' })).rejects.toEqual(failure("NoSuchKey", 404));
    const { ETag } = await put("seen", "first");
    await put("seen", "second", { IfMatch: ETag });
    await expect(put("seen", "third", { IfMatch: ETag })).rejects.toEqual(failure("PreconditionFailed", 412));
    expect(await text("seen")).toBe("second");
  });

  test("do not disturb who is reading", async () => {
    const body = randomBytes(8 * 1024 * 1024);
    await put("read", body);
    const got = await get("read");
    await put("read", "replaced");
    await s3.send(new DeleteObjectCommand({ Bucket: PRIVATE, Key: "read" }));
    expect(Buffer.from((await got.Body?.transformToByteArray()) ?? []).equals(body)).toBe(true);
    await storage.stop();
    expect((await storage.files()).filter((file) => file.endsWith(".data"))).toEqual([]);
  });
});

describe("the public bucket", () => {
  beforeEach(async () => {
    await put("p/abc.webp", "proof", { ContentType: "image/webp" }, PUBLIC);
    await put("scan.tif", "scan");
  });

  test("lets anyone read an object whose key they know, and do nothing else", async () => {
    const url = `${storage.url}/${PUBLIC}/p/abc.webp`;
    const open = await fetch(url);
    expect([open.status, await open.text()]).toEqual([200, "proof"]);
    const headed = await fetch(url, { method: "HEAD" });
    expect([headed.status, headed.headers.get("content-length")]).toEqual([200, "5"]);
    const again = await send(url, { headers: { "if-none-match": open.headers.get("etag") ?? "" } });
    expect([again.status, again.body.length]).toEqual([304, 0]);

    const refusals = [
      await send(`${storage.url}/${PUBLIC}/`),
      await send(`${storage.url}/${PUBLIC}?list-type=2`),
      await send(`${storage.url}/`),
      await send(`${storage.url}/${PUBLIC}/p/other.webp`),
      await send(`${url}?uploadId=x`),
      await send(url, { method: "PUT", body: "mine" }),
      await send(url, { method: "DELETE" }),
      await send(`${url}?uploads`, { method: "POST" }),
      await send(`${storage.url}/${PUBLIC}?delete`, { method: "POST", body: "<Delete/>" }),
    ];
    for (const refusal of refusals) expect(refusal).toMatchObject({ status: 403, code: "AccessDenied" });
    expect(await send(`${url}?response-content-type=text/html`)).toMatchObject({
      status: 400,
      code: "InvalidRequest",
    });
    expect(await text("p/abc.webp", {}, PUBLIC)).toBe("proof");
  });

  test("opens no way into the private one", async () => {
    for (const path of [
      `${PRIVATE}/scan.tif`,
      `${PUBLIC}/../${PRIVATE}/scan.tif`,
      `${PUBLIC}%2F..%2F${PRIVATE}/scan.tif`,
    ]) {
      expect(await send(`${storage.url}/${path}`)).toMatchObject({ status: 403, code: "AccessDenied" });
      expect((await send(`${storage.url}/${path}`, { method: "HEAD" })).status).toBe(403);
    }
  });
});

describe("pages of other origins", () => {
  const preflight = (headers: Record<string, string>, path = `${PRIVATE}/scan.tif`) =>
    send(`${storage.url}/${path}`, { method: "OPTIONS", headers });

  test("a configured one may upload and read the ETag", async () => {
    const answer = await preflight({
      origin: ORIGIN,
      "access-control-request-method": "PUT",
      "access-control-request-headers": "content-type",
    });
    expect(answer.status).toBe(200);
    expect(answer.headers).toMatchObject({
      "access-control-allow-origin": ORIGIN,
      "access-control-allow-methods": expect.stringContaining("PUT"),
      "access-control-allow-headers": "content-type",
      vary: expect.stringContaining("Origin"),
    });
    await put("open", "x", {}, PUBLIC);
    for (const path of [`${PUBLIC}/open`, `${PRIVATE}/refused`]) {
      const { headers } = await send(`${storage.url}/${path}`, { headers: { origin: ORIGIN } });
      expect(headers["access-control-allow-origin"]).toBe(ORIGIN);
      expect(headers["access-control-expose-headers"]).toContain("ETag");
      expect(headers.vary).toBe("Origin");
    }
  });

  test("any other is refused, and never told *", async () => {
    for (const origin of ["http://127.0.0.1:3001", "https://127.0.0.1:3000", "null", "*"]) {
      const answer = await preflight({ origin, "access-control-request-method": "PUT" });
      expect(answer).toMatchObject({ status: 403, code: "AccessForbidden" });
      expect(answer.headers["access-control-allow-origin"]).toBeUndefined();
      const read = await send(`${storage.url}/${PUBLIC}/open`, { headers: { origin } });
      expect(read.headers["access-control-allow-origin"]).toBeUndefined();
      expect(read.headers.vary).toBe("Origin");
    }
    expect(await preflight({ origin: ORIGIN })).toMatchObject({ status: 400, code: "BadRequest" });
    expect(await preflight({ origin: ORIGIN, "access-control-request-method": "PATCH" })).toMatchObject({
      status: 403,
      code: "AccessForbidden",
    });
  });
});

describe("what is written", () => {
  test("is there after a restart, as it was", async () => {
    await put("a/b", "text", {
      ContentType: "text/plain",
      Metadata: { a: "b" },
      ChecksumAlgorithm: "SHA256",
    });
    await put("deleted", "x");
    await s3.send(new DeleteObjectCommand({ Bucket: PRIVATE, Key: "deleted" }));
    const before = await head("a/b", { ChecksumMode: "ENABLED" });
    await storage.restart();
    s3 = storage.client();
    const { $metadata: _before, ...expected } = before;
    expect(await head("a/b", { ChecksumMode: "ENABLED" })).toMatchObject(expected);
    expect(await text("a/b")).toBe("text");
    await expect(head("deleted")).rejects.toEqual(failure("NotFound", 404));
  });

  test("never shows when the upload was cut off", async () => {
    await put("kept", "what was there");
    await Promise.all(["kept", "new"].map((key) => cutOff(key, 5_000_000, 3_000_000)));
    // Closing waits for the requests under way, so nothing is left to happen afterwards.
    await storage.stop();
    expect(await storage.temporaryFiles()).toEqual([]);
    await storage.start();
    s3 = storage.client();
    expect(await text("kept")).toBe("what was there");
    await expect(head("new")).rejects.toEqual(failure("NotFound", 404));
  });

  /** Sends part of a signed body, waits until the server has begun to keep it, and cuts the connection. */
  async function cutOff(key: string, length: number, sent: number): Promise<void> {
    let head = "";
    const signer = storage.client({ requestChecksumCalculation: "WHEN_REQUIRED" });
    signer.middlewareStack.add(
      () => async (args) => {
        const { method, path, headers } = args.request as {
          method: string;
          path: string;
          headers: Record<string, string>;
        };
        const lines = Object.entries(headers).map(([name, value]) => `${name}: ${value}\r\n`);
        head = `${method} ${path}?x-id=PutObject HTTP/1.1\r\n${lines.join("")}\r\n`;
        throw new Error("signed");
      },
      { step: "finalizeRequest", priority: "low" },
    );
    const body = Buffer.alloc(length, "x");
    await expect(
      signer.send(new PutObjectCommand({ Bucket: PRIVATE, Key: key, Body: body })),
    ).rejects.toThrow("signed");
    const socket = connect(storage.port, "127.0.0.1");
    await new Promise((resolve) => socket.write(head, resolve));
    await new Promise((resolve) => socket.write(body.subarray(0, sent), resolve));
    await expect.poll(async () => (await storage.temporaryFiles()).length).toBeGreaterThan(0);
    socket.destroy();
  }

  test("leaves nothing but its document and its data on the disk", async () => {
    await put("one", "text");
    const files = (await storage.files()).map((file) => file.slice(storage.folder.length));
    expect(files).toHaveLength(2);
    const document = files.find((file) => file.endsWith(".json")) ?? "";
    const record = JSON.parse(await readFile(join(storage.folder, document), "utf8"));
    expect(record).toMatchObject({ version: 1, key: "one", size: 4, etag: md5("text") });
  });
});
