import { createHash, randomBytes } from "node:crypto";
import {
  CreateMultipartUploadCommand,
  GetObjectCommand,
  HeadObjectCommand,
  ListObjectsV2Command,
  PutObjectCommand,
  type S3Client,
} from "@aws-sdk/client-s3";
import { getSignedUrl } from "@aws-sdk/s3-request-presigner";
import { afterEach, beforeEach, describe, expect, test } from "vitest";
import { createCrc } from "../../storage-fake/crc";
import { deriveSigningKey, formatScope, sha256Hex, sign } from "../../storage-fake/sigv4";
import {
  CREDENTIALS,
  PRIVATE,
  PUBLIC,
  type RawRequest,
  REGION,
  send,
  TestStorage,
} from "../support/storage-server";

const NOON = new Date("2026-12-01T12:00:00.000Z");
const MINUTE = 60_000;
const later = (minutes: number) => new Date(NOON.getTime() + minutes * MINUTE);

let storage: TestStorage;
/** Set as the project sets its own: without a checksum nobody asked for. */
let s3: S3Client;

beforeEach(async () => {
  storage = await TestStorage.open();
  s3 = storage.client({ requestChecksumCalculation: "WHEN_REQUIRED" });
});
afterEach(() => storage.dispose());

const keysThere = async () => {
  const { Contents } = await s3.send(new ListObjectsV2Command({ Bucket: PRIVATE }));
  return (Contents ?? []).map((entry) => entry.Key);
};

interface SignedRequest {
  method: string;
  path: string;
  headers: Record<string, string>;
}

describe("a request signed in its header", () => {
  /** Lets the SDK sign a PUT of "the body", then changes it, then sends it. */
  async function putChanged(
    change: (request: SignedRequest) => void,
  ): Promise<{ code: string; status: number }> {
    const client = storage.client({ requestChecksumCalculation: "WHEN_REQUIRED" });
    client.middlewareStack.add(
      (next) => (args) => {
        change(args.request as SignedRequest);
        return next(args);
      },
      { step: "finalizeRequest", priority: "low" },
    );
    const command = new PutObjectCommand({
      Bucket: PRIVATE,
      Key: "signed",
      Body: "the body",
      ContentType: "text/plain",
      Metadata: { frame: "12" },
    });
    try {
      const { $metadata } = await client.send(command);
      return { code: "", status: $metadata.httpStatusCode ?? 0 };
    } catch (error) {
      const { name, $metadata } = error as { name: string; $metadata: { httpStatusCode?: number } };
      return { code: name, status: $metadata.httpStatusCode ?? 0 };
    }
  }

  test("is accepted as it was signed", async () => {
    expect(await putChanged(() => {})).toEqual({ code: "", status: 200 });
    // The SDK leaves some headers out of its signature; those may be added.
    expect(
      await putChanged((request) => Object.assign(request.headers, { "cache-control": "no-cache" })),
    ).toEqual({
      code: "",
      status: 200,
    });
    expect(await keysThere()).toEqual(["signed"]);
  });

  const authorization = (request: SignedRequest) => request.headers.authorization ?? "";
  test.each<[string, string, number, (request: SignedRequest) => void]>([
    [
      "another key",
      "SignatureDoesNotMatch",
      403,
      (request) => {
        request.path = request.path.replace("signed", "other");
      },
    ],
    [
      "another bucket",
      "SignatureDoesNotMatch",
      403,
      (request) => {
        request.path = request.path.replace(PRIVATE, PUBLIC);
      },
    ],
    [
      "another method",
      "SignatureDoesNotMatch",
      403,
      (request) => {
        request.method = "DELETE";
      },
    ],
    [
      "another type",
      "SignatureDoesNotMatch",
      403,
      (request) => {
        request.headers["content-type"] = "text/html";
      },
    ],
    [
      "other metadata",
      "SignatureDoesNotMatch",
      403,
      (request) => {
        request.headers["x-amz-meta-frame"] = "13";
      },
    ],
    [
      "metadata taken away",
      "SignatureDoesNotMatch",
      403,
      (request) => {
        delete request.headers["x-amz-meta-frame"];
      },
    ],
    [
      "metadata that was not signed",
      "AccessDenied",
      403,
      (request) => {
        request.headers["x-amz-meta-more"] = "x";
      },
    ],
    [
      "a source to copy that was not signed",
      "AccessDenied",
      403,
      (request) => {
        request.headers["x-amz-copy-source"] = `${PRIVATE}/secret`;
      },
    ],
    [
      "a host that was not signed",
      "AccessDenied",
      403,
      (request) => {
        request.headers.authorization = authorization(request).replace(";host", "");
      },
    ],
    [
      "another signature",
      "SignatureDoesNotMatch",
      403,
      (request) => {
        request.headers.authorization = authorization(request).replace(/.$/, (digit) =>
          digit === "0" ? "1" : "0",
        );
      },
    ],
    [
      "a signature of another length",
      "SignatureDoesNotMatch",
      403,
      (request) => {
        request.headers.authorization = authorization(request).slice(0, -1);
      },
    ],
    [
      "another access key",
      "InvalidAccessKeyId",
      403,
      (request) => {
        request.headers.authorization = authorization(request).replace(CREDENTIALS.accessKeyId, "someone");
      },
    ],
    [
      "another region",
      "AuthorizationHeaderMalformed",
      400,
      (request) => {
        request.headers.authorization = authorization(request).replace(REGION, "eu-north-1");
      },
    ],
    [
      "another service",
      "AuthorizationHeaderMalformed",
      400,
      (request) => {
        request.headers.authorization = authorization(request).replace("/s3/", "/sqs/");
      },
    ],
    [
      "no signature in the header",
      "AuthorizationHeaderMalformed",
      400,
      (request) => {
        request.headers.authorization = authorization(request).replace(/, Signature=.*/, "");
      },
    ],
    [
      "another kind of signature",
      "InvalidRequest",
      400,
      (request) => {
        request.headers.authorization = `AWS ${CREDENTIALS.accessKeyId}:c2lnbmF0dXJl`;
      },
    ],
    [
      "no header at all",
      "AccessDenied",
      403,
      (request) => {
        delete request.headers.authorization;
      },
    ],
    [
      "no date",
      "AccessDenied",
      403,
      (request) => {
        delete request.headers["x-amz-date"];
      },
    ],
    [
      "no hash of the body",
      "InvalidRequest",
      400,
      (request) => {
        delete request.headers["x-amz-content-sha256"];
      },
    ],
    [
      "a session token",
      "InvalidToken",
      400,
      (request) => {
        request.headers["x-amz-security-token"] = "token";
      },
    ],
  ])("with %s is refused", async (_name, code, status, change) => {
    expect(await putChanged(change)).toEqual({ code, status });
    expect(await keysThere()).toEqual([]);
  });

  test("with another body is refused by the body's hash", async () => {
    const client = storage.client({ requestChecksumCalculation: "WHEN_REQUIRED" });
    client.middlewareStack.add(
      (next) => (args) => {
        (args.request as { body: unknown }).body = "THE BODY";
        return next(args);
      },
      { step: "finalizeRequest", priority: "low" },
    );
    const command = new PutObjectCommand({ Bucket: PRIVATE, Key: "signed", Body: "the body" });
    await expect(client.send(command)).rejects.toMatchObject({ name: "XAmzContentSHA256Mismatch" });
    expect(await keysThere()).toEqual([]);
    expect(await storage.temporaryFiles()).toEqual([]);
  });

  test("by another secret is refused", async () => {
    const stranger = storage.client({ credentials: { ...CREDENTIALS, secretAccessKey: "guessed" } });
    const command = new PutObjectCommand({ Bucket: PRIVATE, Key: "x", Body: "x" });
    await expect(stranger.send(command)).rejects.toMatchObject({
      name: "SignatureDoesNotMatch",
      $metadata: { httpStatusCode: 403 },
    });
  });

  test("by a clock a quarter of an hour off is refused, less is not", async () => {
    const command = new HeadObjectCommand({ Bucket: PRIVATE, Key: "nothing" });
    const raw = () => new GetObjectCommand({ Bucket: PRIVATE, Key: "nothing" });
    for (const minutes of [-16, 16]) {
      storage.time = new Date(Date.now() + minutes * MINUTE);
      await expect(storage.client().send(raw())).rejects.toMatchObject({ name: "RequestTimeTooSkewed" });
    }
    for (const minutes of [-14, 14]) {
      storage.time = new Date(Date.now() + minutes * MINUTE);
      await expect(storage.client().send(command)).rejects.toMatchObject({ name: "NotFound" });
    }
  });

  test("is told early that it is refused, before it sends its body", async () => {
    const answer = await send(`${storage.url}/${PRIVATE}/large`, {
      method: "PUT",
      headers: { expect: "100-continue", "content-length": "5000000" },
    }).catch((error: Error) => error);
    expect(answer).toMatchObject({ status: 403, code: "AccessDenied", headers: { connection: "close" } });
  });
});

describe("a presigned address", () => {
  beforeEach(() => {
    storage.time = NOON;
  });
  const presign = async (
    command: PutObjectCommand | GetObjectCommand | CreateMultipartUploadCommand,
    more: object = {},
  ): Promise<string> => {
    const options = { signingDate: NOON, expiresIn: 600, ...more };
    if (command instanceof PutObjectCommand) return await getSignedUrl(s3, command, options);
    if (command instanceof GetObjectCommand) return await getSignedUrl(s3, command, options);
    return await getSignedUrl(s3, command, options);
  };
  const presignPut = (key: string, more: object = {}) =>
    presign(
      new PutObjectCommand({ Bucket: PRIVATE, Key: key, ContentType: "image/tiff", ContentLength: 4 }),
      {
        signableHeaders: new Set(["host", "content-type", "content-length"]),
        ...more,
      },
    );
  const upload: RawRequest = { method: "PUT", headers: { "content-type": "image/tiff" }, body: "scan" };

  test.each(["rolls/1/frame 12.tif", "Mühle+[1] (2).tif", "a/../b", "100%/ü&?#.tif"])(
    "lets its holder put %s and get it again",
    async (key) => {
      expect((await send(await presignPut(key), upload)).status).toBe(200);
      const got = await send(await presign(new GetObjectCommand({ Bucket: PRIVATE, Key: key })));
      expect([got.status, got.body.toString(), got.headers["content-type"]]).toEqual([
        200,
        "scan",
        "image/tiff",
      ]);
    },
  );

  test("works until it ends, and not before it begins", async () => {
    const url = await presignPut("x");
    for (const [minutes, status] of [
      [-14, 200],
      [0, 200],
      [10, 200],
    ] as const) {
      storage.time = later(minutes);
      expect((await send(url, upload)).status).toBe(status);
    }
    storage.time = later(10.1);
    const expired = await send(url, upload);
    expect(expired).toMatchObject({ status: 403, code: "AccessDenied" });
    expect(expired.element("Message")).toBe("Request has expired");
    expect(expired.element("Expires")).toBe("2026-12-01T12:10:00.000Z");
    storage.time = later(-16);
    const early = await send(url, upload);
    expect(early).toMatchObject({ status: 403, code: "AccessDenied" });
    expect(early.element("Message")).toContain("not valid yet");
  });

  const replace = (from: string | RegExp, to: string) => (url: string) => url.replace(from, to);
  test.each<[string, string, number, (url: string) => string]>([
    ["another key", "SignatureDoesNotMatch", 403, replace("/frame", "/other")],
    ["another bucket", "SignatureDoesNotMatch", 403, replace(PRIVATE, PUBLIC)],
    ["another signature", "SignatureDoesNotMatch", 403, replace(/(Signature=)./, "$1x")],
    ["a parameter more", "SignatureDoesNotMatch", 403, (url) => `${url}&uploadId=x`],
    ["a longer life", "SignatureDoesNotMatch", 403, replace("Expires=600", "Expires=6000")],
    ["a life of more than seven days", "AuthorizationQueryParametersError", 400, replace("=600", "=604801")],
    ["a negative life", "AuthorizationQueryParametersError", 400, replace("=600", "=-1")],
    ["a life that is no number", "AuthorizationQueryParametersError", 400, replace("=600", "=long")],
    ["a date that is none", "AuthorizationQueryParametersError", 400, replace(/Date=\d+T/, "Date=20260231T")],
    [
      "a date of another day",
      "AuthorizationQueryParametersError",
      400,
      replace(/Date=20261201T/, "Date=20261130T"),
    ],
    ["no date", "AuthorizationQueryParametersError", 400, replace(/&X-Amz-Date=\w+/, "")],
    ["no signature", "AuthorizationQueryParametersError", 400, replace(/&X-Amz-Signature=\w+/, "")],
    ["no algorithm", "AuthorizationQueryParametersError", 400, replace(/X-Amz-Algorithm=[\w-]+&/, "")],
    ["another algorithm", "AuthorizationQueryParametersError", 400, replace("HMAC-SHA256", "HMAC-SHA1")],
    ["another region", "AuthorizationQueryParametersError", 400, replace(REGION, "eu-north-1")],
    ["another access key", "InvalidAccessKeyId", 403, replace(CREDENTIALS.accessKeyId, "someone")],
    ["host not signed", "AccessDenied", 403, replace("%3Bhost", "")],
  ])("with %s is refused", async (_name, code, status, change) => {
    const url = await presignPut("roll/frame");
    const changed = change(url);
    expect(changed).not.toBe(url);
    expect(await send(changed, upload)).toMatchObject({ code, status });
    expect((await send(url, upload)).status).toBe(200);
  });

  test.each<[string, string, number, RawRequest]>([
    ["another method", "SignatureDoesNotMatch", 403, { method: "GET", headers: upload.headers }],
    ["another type", "SignatureDoesNotMatch", 403, { ...upload, headers: { "content-type": "text/html" } }],
    ["no type", "SignatureDoesNotMatch", 403, { ...upload, headers: {} }],
    ["another length", "SignatureDoesNotMatch", 403, { ...upload, body: "scans" }],
    [
      "metadata that was not signed",
      "AccessDenied",
      403,
      { ...upload, headers: { ...upload.headers, "x-amz-meta-frame": "1" } },
    ],
    [
      "a signature in the header too",
      "InvalidArgument",
      400,
      { ...upload, headers: { ...upload.headers, authorization: "AWS4-HMAC-SHA256 Credential=x" } },
    ],
  ])("used with %s is refused", async (_name, code, status, request) => {
    const answer = await send(await presignPut("bound"), request);
    expect(answer).toMatchObject({ code, status });
    if (code === "AccessDenied") expect(answer.element("HeadersNotSigned")).toBe("x-amz-meta-frame");
    storage.time = undefined;
    expect(await keysThere()).toEqual([]);
  });

  test("carries metadata in its query, where it counts", async () => {
    const command = new PutObjectCommand({ Bucket: PRIVATE, Key: "meta", Metadata: { roll: "12" } });
    const url = await presign(command);
    expect(url).toContain("x-amz-meta-roll=12");
    expect(await send(url.replace("roll=12", "roll=13"), upload)).toMatchObject({
      code: "SignatureDoesNotMatch",
    });
    expect((await send(url, upload)).status).toBe(200);
    storage.time = undefined;
    const { Metadata } = await s3.send(new HeadObjectCommand({ Bucket: PRIVATE, Key: "meta" }));
    expect(Metadata).toEqual({ roll: "12" });
  });

  test("by an SDK that signs the checksum of no body refuses every other body", async () => {
    const command = new PutObjectCommand({ Bucket: PRIVATE, Key: "x" });
    const url = await getSignedUrl(storage.client(), command, { signingDate: NOON });
    expect(url).toContain("x-amz-checksum-crc32=AAAAAA");
    expect(await send(url, upload)).toMatchObject({ code: "BadDigest", status: 400 });
    expect((await send(url, { method: "PUT", body: "" })).status).toBe(200);
  });

  test("names the file to save as", async () => {
    await send(await presignPut("scan"), upload);
    const disposition = "attachment; filename*=UTF-8''M%C3%BChle.tif";
    const command = new GetObjectCommand({
      Bucket: PRIVATE,
      Key: "scan",
      ResponseContentDisposition: disposition,
    });
    const got = await send(await presign(command));
    expect(got.headers["content-disposition"]).toBe(disposition);
  });

  test("works from a browser's fetch, which normalises addresses of its own accord", async () => {
    const url = await presignPut("roll 1/[a] {b} ü~'()*.tif");
    const answer = await fetch(url, {
      method: "PUT",
      headers: { "content-type": "image/tiff" },
      body: "scan",
    });
    expect([answer.status, answer.headers.get("etag")]).toEqual([
      200,
      `"${createHash("md5").update("scan").digest("hex")}"`,
    ]);
  });

  test("begins an upload in parts", async () => {
    const command = new CreateMultipartUploadCommand({ Bucket: PRIVATE, Key: "large" });
    const answer = await send(await presign(command), {
      method: "POST",
      headers: { "content-type": "image/tiff" },
    });
    expect(answer.status).toBe(200);
    expect(answer.element("UploadId")).toMatch(/^[\w-]{20,}$/);
  });
});

describe("a body in signed chunks", () => {
  const DATE = "20261201T120000Z";
  const SCOPE = { date: "20261201", region: REGION };
  const KEY = deriveSigningKey(CREDENTIALS.secretAccessKey, SCOPE);
  beforeEach(() => {
    storage.time = NOON;
  });

  /** Signs a PUT in chunks, as the S3 reference describes it, with trailing fields when there are any. */
  function chunkedPut(chunks: readonly Buffer[], trailers: Record<string, string> = {}) {
    const names = Object.keys(trailers);
    const length = chunks.reduce((sum, chunk) => sum + chunk.length, 0);
    const payload = `STREAMING-AWS4-HMAC-SHA256-PAYLOAD${names.length > 0 ? "-TRAILER" : ""}`;
    const headers: Record<string, string> = {
      "content-encoding": "aws-chunked",
      host: `127.0.0.1:${storage.port}`,
      "x-amz-content-sha256": payload,
      "x-amz-date": DATE,
      "x-amz-decoded-content-length": String(length),
      ...(names.length > 0 ? { "x-amz-trailer": names.join(",") } : {}),
    };
    const signedHeaders = Object.keys(headers).join(";");
    const canonical = [
      "PUT",
      `/${PRIVATE}/chunked`,
      "",
      ...Object.entries(headers).map(([name, value]) => `${name}:${value}`),
      "",
      signedHeaders,
      payload,
    ].join("\n");
    const scope = formatScope(SCOPE);
    let previous = sign(KEY, ["AWS4-HMAC-SHA256", DATE, scope, sha256Hex(canonical)].join("\n"));
    headers.authorization = `AWS4-HMAC-SHA256 Credential=${CREDENTIALS.accessKeyId}/${scope},SignedHeaders=${signedHeaders},Signature=${previous}`;

    const pieces: Buffer[] = [];
    for (const chunk of [...chunks, Buffer.of()]) {
      const lines = ["AWS4-HMAC-SHA256-PAYLOAD", DATE, scope, previous, sha256Hex(""), sha256Hex(chunk)];
      previous = sign(KEY, lines.join("\n"));
      const end = chunk.length > 0 ? "\r\n" : "";
      pieces.push(
        Buffer.from(`${chunk.length.toString(16)};chunk-signature=${previous}\r\n`),
        chunk,
        Buffer.from(end),
      );
    }
    const fields = Object.entries(trailers).map(([name, value]) => `${name}:${value}\n`);
    if (fields.length > 0) {
      const lines = ["AWS4-HMAC-SHA256-TRAILER", DATE, scope, previous, sha256Hex(fields.join(""))];
      fields.push(`x-amz-trailer-signature:${sign(KEY, lines.join("\n"))}\n`);
    }
    pieces.push(Buffer.from(`${fields.join("").replaceAll("\n", "\r\n")}\r\n`));
    return { headers, body: Buffer.concat(pieces) };
  }

  const chunks = [randomBytes(65_536), randomBytes(8192), randomBytes(100)];
  const whole = Buffer.concat(chunks);
  const put = (request: RawRequest) =>
    send(`${storage.url}/${PRIVATE}/chunked`, { method: "PUT", ...request });
  const crcOf = (data: Buffer) => {
    const crc = createCrc("crc32");
    crc.update(data);
    return crc.digest().toString("base64");
  };

  test("is taken when every signature is right", async () => {
    expect((await put(chunkedPut(chunks))).status).toBe(200);
    storage.time = undefined;
    const got = await s3.send(new GetObjectCommand({ Bucket: PRIVATE, Key: "chunked" }));
    expect(got.ContentEncoding).toBeUndefined();
    expect(Buffer.from((await got.Body?.transformToByteArray()) ?? []).equals(whole)).toBe(true);
  });

  test("is taken with a signed checksum behind it", async () => {
    const answer = await put(chunkedPut(chunks, { "x-amz-checksum-crc32": crcOf(whole) }));
    expect(answer.status).toBe(200);
    expect(answer.headers["x-amz-checksum-crc32"]).toBe(crcOf(whole));
    const wrong = await put(chunkedPut(chunks, { "x-amz-checksum-crc32": crcOf(Buffer.from("other")) }));
    expect(wrong).toMatchObject({ status: 400, code: "BadDigest" });
  });

  test.each<[string, string, (request: { body: Buffer }) => void]>([
    [
      "a changed byte",
      "SignatureDoesNotMatch",
      ({ body }) => {
        body[500] = (body[500] ?? 0) ^ 1;
      },
    ],
    [
      "a changed byte in the last chunk",
      "SignatureDoesNotMatch",
      ({ body }) => {
        const at = body.length - 150;
        body[at] = (body[at] ?? 0) ^ 1;
      },
    ],
    [
      "a chunk left out",
      "SignatureDoesNotMatch",
      (request) => {
        const second = request.body.indexOf("2000;chunk-signature=");
        const third = request.body.indexOf("64;chunk-signature=", second);
        request.body = Buffer.concat([request.body.subarray(0, second), request.body.subarray(third)]);
      },
    ],
    [
      "the end cut off",
      "IncompleteBody",
      (request) => {
        request.body = request.body.subarray(0, -200);
      },
    ],
    [
      "unsigned chunks",
      "SignatureDoesNotMatch",
      (request) => {
        const text = request.body.toString("latin1").replaceAll(/;chunk-signature=[0-9a-f]{64}/g, "");
        request.body = Buffer.from(text, "latin1");
      },
    ],
  ])("with %s is refused", async (_name, code, change) => {
    const request = chunkedPut(chunks);
    change(request);
    expect(await put(request)).toMatchObject({ code });
    storage.time = undefined;
    expect(await keysThere()).toEqual([]);
    expect(await storage.temporaryFiles()).toEqual([]);
  });

  test("with a changed trailing field is refused", async () => {
    const request = chunkedPut(chunks, { "x-amz-checksum-crc32": crcOf(whole) });
    const text = request.body.toString("latin1").replace(`crc32:${crcOf(whole)}`, "crc32:AAAAAA==");
    expect(await put({ ...request, body: Buffer.from(text, "latin1") })).toMatchObject({
      code: "SignatureDoesNotMatch",
    });
  });
});
