import { mkdtemp, readdir, rm } from "node:fs/promises";
import { request as httpRequest, type IncomingHttpHeaders } from "node:http";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { S3Client, type S3ClientConfig } from "@aws-sdk/client-s3";
import {
  createStorageServer,
  type StorageFault,
  type StorageServer,
  type StorageServerOptions,
} from "../../storage-fake/server";

export const PRIVATE = "test-private";
export const PUBLIC = "test-public";
export const ORIGIN = "http://127.0.0.1:3000";
export const CREDENTIALS = { accessKeyId: "test-studio", secretAccessKey: "test secret of the studio" };
export const REGION = "eu-west-1";

/** A storage server of one test: its address, the faults it reported, and the SDK as its client. */
export class TestStorage {
  readonly faults: StorageFault[] = [];
  /** What the server takes the time to be; undefined for the real one. */
  time: Date | undefined;
  url = "";
  port = 0;
  private storage: StorageServer | undefined;
  private readonly clients: S3Client[] = [];

  private constructor(readonly folder: string) {}

  /** Starts a server on a free port with an empty folder. */
  static async open(): Promise<TestStorage> {
    const storage = new TestStorage(await mkdtemp(join(tmpdir(), "numberleaf-storage-")));
    await storage.start();
    return storage;
  }

  /** Stops it and removes its folder. A fault of the server's own fails the test that caused it. */
  async dispose(): Promise<void> {
    await this.stop();
    await rm(this.folder, { recursive: true, force: true });
    const [fault] = this.faults;
    if (fault) throw new Error(`the server reported: ${fault.message}`, { cause: fault.cause });
  }

  async start(options: Partial<StorageServerOptions> = {}): Promise<void> {
    this.storage = createStorageServer({
      host: "127.0.0.1",
      port: 0,
      folder: this.folder,
      ...CREDENTIALS,
      region: REGION,
      privateBucket: PRIVATE,
      publicBucket: PUBLIC,
      corsOrigins: [ORIGIN],
      now: () => this.time ?? new Date(),
      reportFault: (fault) => this.faults.push(fault),
      ...options,
    });
    ({ url: this.url, port: this.port } = await this.storage.listen());
  }

  /** Ends every client and the server, which waits for the requests it was serving. */
  async stop(): Promise<void> {
    for (const client of this.clients.splice(0)) client.destroy();
    await this.storage?.close();
    this.storage = undefined;
  }

  async restart(): Promise<void> {
    await this.stop();
    await this.start();
  }

  /** The SDK with its own defaults, but for what a test must say. */
  client(config: Partial<S3ClientConfig> = {}): S3Client {
    const client = new S3Client({
      endpoint: this.url,
      forcePathStyle: true,
      region: REGION,
      credentials: CREDENTIALS,
      maxAttempts: 1,
      ...config,
    });
    this.clients.push(client);
    return client;
  }

  /** Names of the files that uploads are being written to. */
  async temporaryFiles(): Promise<string[]> {
    return await readdir(join(this.folder, "tmp"));
  }

  /** Every file below the folder, by its path within it. */
  async files(): Promise<string[]> {
    const entries = await readdir(this.folder, { recursive: true, withFileTypes: true });
    return entries.filter((entry) => entry.isFile()).map((entry) => join(entry.parentPath, entry.name));
  }
}

export interface RawAnswer {
  status: number;
  headers: IncomingHttpHeaders;
  body: Buffer;
  /** The `Code` of an XML error; empty when it is none. */
  code: string;
  /** The text of an element of the XML answer. */
  element: (name: string) => string | undefined;
}

export interface RawRequest {
  method?: string;
  headers?: Record<string, string>;
  body?: string | Buffer;
}

/** Sends a request exactly as given: unlike fetch, it leaves dots in the path and every header alone. */
export function send(url: string, options: RawRequest = {}): Promise<RawAnswer> {
  const parts = /^http:\/\/([^:/]+):(\d+)(\/.*)$/.exec(url);
  if (!parts) throw new Error(`${url} is no address of a test server`);
  const [, hostname, port, path] = parts;
  return new Promise((resolve, reject) => {
    const request = httpRequest(
      { hostname, port, path, method: options.method ?? "GET", headers: options.headers, agent: false },
      (response) => {
        const pieces: Buffer[] = [];
        response.on("data", (piece: Buffer) => pieces.push(piece));
        response.on("error", reject);
        response.on("end", () => {
          const body = Buffer.concat(pieces);
          const element = (name: string) =>
            new RegExp(`<${name}>([^<]*)</${name}>`).exec(body.toString())?.[1];
          const code = element("Code") ?? "";
          resolve({ status: response.statusCode ?? 0, headers: response.headers, body, code, element });
        });
      },
    );
    request.on("error", reject);
    request.end(options.body);
  });
}
