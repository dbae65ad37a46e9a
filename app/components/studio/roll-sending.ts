import type Uppy from "@uppy/core";
import type { UppyFile } from "@uppy/core";
import { inFileOrder } from "~/domain/rolls/file-order";
import { MOST_FILES_AT_ONCE, type UploadAnswer, type UploadMessage } from "~/domain/rolls/uploading";

/** A file on its way from this browser to storage. */
export type SentFile = {
  scanId: string;
  frameId: string;
  name: string;
  size: number;
  /** Bytes. */
  sent: number;
  state: "waiting" | "sending" | "failed" | "arrived";
  /** Why it failed, in words. */
  problem: string | null;
  /** An address of the file itself where the browser can draw it; TIFF it cannot. */
  preview: string | null;
};

export type SendingState = {
  files: readonly SentFile[];
  /** Files that the server could not be told of, and why. */
  unannounced: { count: number; problem: string } | null;
  /** Bytes a second, over all; null before there is anything to go by. */
  speed: number | null;
};

const MiB = 1024 * 1024;
/** Larger files go in parts, so that a broken line costs a part and not the file. */
const IN_PARTS_FROM = 64 * MiB;
const PART = 16 * MiB;
const FILES_AT_ONCE = 3;
/** A picture this large would cost more memory as a preview than it is worth. */
const PREVIEW_UP_TO = 40 * MiB;

type Meta = { scanId: string; [name: string]: unknown };
type Answered = Record<string, never>;
type Sender = Uppy<Meta, Answered>;

const NOTHING: SendingState = { files: [], unannounced: null, speed: null };

/**
 * Sends scans straight to storage, each request signed by the studio for one scan. Lives as long as the page that shows
 * it; what it shows is read with `subscribe` and `snapshot`.
 */
export class Sending {
  readonly #address: string;
  readonly #arrived: () => void;
  readonly #listeners = new Set<() => void>();
  #state = NOTHING;
  #sender: Promise<Sender> | undefined;
  #unannounced: { files: File[]; frameId: string | undefined } | undefined;
  #begun = 0;
  #told = false;

  /** @param arrived called whenever a scan has arrived, so that the page asks how it stands */
  constructor(address: string, arrived: () => void) {
    this.#address = address;
    this.#arrived = arrived;
  }

  readonly subscribe = (listener: () => void): (() => void) => {
    this.#listeners.add(listener);
    return () => this.#listeners.delete(listener);
  };

  readonly snapshot = (): SendingState => this.#state;

  /** Whether anything is waiting or on its way. */
  get busy(): boolean {
    return this.#state.files.some((file) => file.state === "waiting" || file.state === "sending");
  }

  /** Announces files in the order of their names and sends them; with `frameId`, one as another version of its scan. */
  async add(chosen: readonly File[], frameId?: string): Promise<void> {
    const files = inFileOrder(chosen);
    try {
      const sender = await this.#start();
      for (let at = 0; at < files.length; at += MOST_FILES_AT_ONCE) {
        await this.#announce(sender, files.slice(at, at + MOST_FILES_AT_ONCE), frameId);
      }
      this.#unannounced = undefined;
      this.#change({ unannounced: null });
      this.#arrived();
      void sender.upload();
    } catch (error) {
      const known = new Set(this.#state.files.map((file) => file.name));
      const left = files.filter((file) => !known.has(file.name));
      this.#unannounced = { files: left, frameId };
      this.#change({ unannounced: { count: left.length, problem: wordsOf(error) } });
    }
  }

  /** Sends again what failed: everything, or one scan. */
  async retry(scanId?: string): Promise<void> {
    const again = this.#unannounced;
    if (again !== undefined && scanId === undefined) await this.add(again.files, again.frameId);
    const sender = await this.#start();
    for (const file of this.#state.files) {
      if (file.state !== "failed" || (scanId !== undefined && file.scanId !== scanId)) continue;
      this.#set(file.scanId, { state: "waiting", problem: null });
      const inSender = sender.getFiles().find((one) => one.meta.scanId === file.scanId);
      if (inSender === undefined) void this.#finish(file.scanId);
      else void sender.retryUpload(inSender.id).catch(() => undefined);
    }
  }

  /** Stops everything that has not arrived. */
  async stop(): Promise<void> {
    const sender = await this.#sender;
    sender?.cancelAll();
    this.#unannounced = undefined;
    for (const file of this.#state.files) forgetPreview(file);
    this.#change({ files: this.#state.files.filter((file) => file.state === "arrived"), unannounced: null });
  }

  async #start(): Promise<Sender> {
    this.#sender ??= this.#makeSender();
    return this.#sender;
  }

  async #makeSender(): Promise<Sender> {
    const [{ default: Core }, { default: AwsS3 }] = await Promise.all([
      import("@uppy/core"),
      import("@uppy/aws-s3"),
    ]);
    const sender: Sender = new Core<Meta, Answered>();
    sender.use(AwsS3<Meta, Answered>, {
      limit: FILES_AT_ONCE,
      allowedMetaFields: [],
      shouldUseMultipart: (file: UppyFile<Meta, Answered>) => (file.size ?? 0) > IN_PARTS_FROM,
      getChunkSize: () => PART,
      // The studio knows the scan and its real key; here the key only says which scan is meant.
      generateObjectKey: (file: UppyFile<Meta, Answered>) => file.meta.scanId,
      signRequest: (request: {
        method: "PUT" | "POST" | "GET" | "DELETE";
        key: string;
        uploadId?: string;
        partNumber?: number;
      }) =>
        this.#ask<"sign">({
          act: "sign",
          scanId: request.key,
          method: request.method,
          uploadId: request.uploadId,
          partNumber: request.partNumber,
        }),
    });
    sender.on("upload-progress", (file, progress) => {
      if (file) this.#set(file.meta.scanId, { state: "sending", sent: progress.bytesUploaded || 0 });
    });
    sender.on("upload-success", (file) => {
      if (!file) return;
      sender.removeFile(file.id);
      void this.#finish(file.meta.scanId);
    });
    sender.on("upload-error", (file, error) => {
      if (file) this.#set(file.meta.scanId, { state: "failed", problem: wordsOf(error) });
    });
    return sender;
  }

  async #announce(sender: Sender, files: readonly File[], frameId: string | undefined): Promise<void> {
    const { scans } = await this.#ask<"begin">({
      act: "begin",
      frameId,
      files: files.map(({ name, size }) => ({ name, size })),
    });
    const added: SentFile[] = [];
    for (const [i, file] of files.entries()) {
      const scan = scans[i];
      if (scan === undefined || scan.refused !== null || this.#isUnderWay(scan.scanId)) continue;
      sender.addFile({
        // Files are told apart by name here, and two of one name and size are still two files.
        name: scan.scanId,
        type: file.type || "application/octet-stream",
        data: file,
        meta: { scanId: scan.scanId },
      });
      added.push({
        scanId: scan.scanId,
        frameId: scan.frameId,
        name: file.name,
        size: file.size,
        sent: 0,
        state: "waiting",
        problem: null,
        preview: previewOf(file),
      });
    }
    // What arrived before is no part of this transfer.
    const goesOn = this.busy;
    if (!goesOn) this.#begun = performance.now();
    const replaced = new Set(added.map((file) => file.scanId));
    const before = this.#state.files.filter(
      (file) => !replaced.has(file.scanId) && (goesOn || file.state === "failed"),
    );
    this.#change({ files: [...before, ...added] });
  }

  #isUnderWay(scanId: string): boolean {
    return this.#state.files.some(
      (file) => file.scanId === scanId && (file.state === "waiting" || file.state === "sending"),
    );
  }

  async #finish(scanId: string): Promise<void> {
    const file = this.#state.files.find((one) => one.scanId === scanId);
    try {
      const { arrived } = await this.#ask<"finished">({ act: "finished", scanId });
      if (!arrived) throw new Refusal("Storage does not have it. Choose the file again.");
      this.#set(scanId, { state: "arrived", sent: file?.size ?? 0, problem: null, preview: null });
      if (file !== undefined) forgetPreview(file);
      this.#arrived();
    } catch (error) {
      this.#set(scanId, { state: "failed", problem: wordsOf(error) });
    }
  }

  async #ask<Act extends keyof UploadAnswer>(
    message: UploadMessage & { act: Act },
  ): Promise<UploadAnswer[Act]> {
    const answer = await fetch(this.#address, {
      method: "POST",
      headers: { "Content-Type": "application/json", Accept: "application/json" },
      body: JSON.stringify(message),
      redirect: "manual",
    });
    if (answer.status === 401 || answer.type === "opaqueredirect") {
      throw new Refusal("Your session has ended. Sign in again in another window, then try again here.");
    }
    if (answer.status === 403) throw new Refusal("You may not change rolls.");
    if (!answer.ok) throw new Refusal("The studio could not answer. Try again.");
    return answer.json();
  }

  #set(scanId: string, change: Partial<SentFile>): void {
    const files = this.#state.files.map((file) => (file.scanId === scanId ? { ...file, ...change } : file));
    this.#change({ files });
  }

  #change(change: Partial<SendingState>): void {
    this.#state = { ...this.#state, ...change };
    this.#state = { ...this.#state, speed: this.#speed() };
    if (this.#told) return;
    this.#told = true;
    // Progress comes many times a second for each file; it is shown as often as the screen is drawn.
    requestAnimationFrame(() => {
      this.#told = false;
      for (const listener of this.#listeners) listener();
    });
  }

  #speed(): number | null {
    const seconds = (performance.now() - this.#begun) / 1000;
    const bytes = this.#state.files.reduce((sum, file) => sum + file.sent, 0);
    return this.#begun === 0 || seconds < 2 || bytes === 0 ? null : bytes / seconds;
  }
}

/** A sentence of ours, to be shown as it is. */
class Refusal extends Error {}

function wordsOf(error: unknown): string {
  if (error instanceof Refusal) return error.message;
  return "The line broke, or storage did not answer.";
}

function previewOf(file: File): string | null {
  const drawable = file.type === "image/jpeg" || file.type === "image/png";
  return drawable && file.size <= PREVIEW_UP_TO ? URL.createObjectURL(file) : null;
}

function forgetPreview(file: SentFile): void {
  if (file.preview !== null) URL.revokeObjectURL(file.preview);
}
