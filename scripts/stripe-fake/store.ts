import {
  closeSync,
  fsyncSync,
  ftruncateSync,
  mkdirSync,
  openSync,
  readFileSync,
  renameSync,
  writeFileSync,
  writeSync,
} from "node:fs";
import { join } from "node:path";
import type Stripe from "stripe";
import type { PresentedCard } from "./cards";
import type { IntentData, WireEvent, WireLineItem } from "./objects";

/** A checkout session and what its payment page needs besides. */
export type SessionRecord = {
  id: string;
  session: Stripe.Checkout.Session;
  lineItems: WireLineItem[];
  shippingRates: Stripe.ShippingRate[];
  intentData: IntentData;
  /** The card that waits for its holder to say yes. */
  awaiting: { card: PresentedCard; payer: { name: string; email: string | null } } | null;
};

export type RefundRecord = {
  id: string;
  refund: Stripe.Refund;
  /** What is still to come of it, and when (milliseconds). */
  settles: { at: number; as: "succeeded" | "failed" } | null;
};

export type ChargeRecord = { id: string; charge: Stripe.Charge; refunds: "pending" | "fails" | null };

/** One event on its way to the webhook address. Times are milliseconds. */
export type Delivery = {
  id: string;
  state: "pending" | "delivered" | "dropped" | "given up";
  madeAt: number;
  nextAt: number;
  attempts: number;
  lastError: string | null;
};

/** The answer kept under an idempotency key. */
export type SavedResult = {
  id: string;
  fingerprint: string;
  status: number;
  body: string;
  requestId: string;
  at: number;
};

type Tables = {
  sessions: SessionRecord;
  intents: Stripe.PaymentIntent;
  charges: ChargeRecord;
  refunds: RefundRecord;
  events: WireEvent;
  deliveries: Delivery;
  results: SavedResult;
};
export type TableName = keyof Tables;
type Rows = { [Name in TableName]: Map<string, Tables[Name]> };
type Change = { [Name in TableName]: [Name, Tables[Name]] }[TableName];

const TABLE_NAMES: readonly TableName[] = [
  "sessions",
  "intents",
  "charges",
  "refunds",
  "events",
  "deliveries",
  "results",
];
const DAY_MS = 24 * 60 * 60 * 1000;
/** Stripe forgets keys after a day and keeps events for thirty. */
export const RESULT_LIFE_MS = DAY_MS;
const EVENT_LIFE_MS = 30 * DAY_MS;
const JOURNAL_LIMIT_BYTES = 64 * 1024 * 1024;

function emptyRows(): Rows {
  return {
    sessions: new Map(),
    intents: new Map(),
    charges: new Map(),
    refunds: new Map(),
    events: new Map(),
    deliveries: new Map(),
    results: new Map(),
  };
}

/**
 * What the fake remembers: maps in memory, and on disk a picture of them (`state.json`, replaced by
 * renaming) with a journal of everything since (`journal.jsonl`, one line a change, all or nothing).
 * A line that a killed process left half written is cut off at the next start: nobody was answered yet.
 */
export class Store {
  readonly #folder: string;
  readonly #rows: Rows;
  #journal: number;
  #journalBytes = 0;
  readonly #pending = new Set<string>();

  constructor(folder: string, now: number) {
    this.#folder = folder;
    mkdirSync(folder, { recursive: true });
    this.#rows = emptyRows();
    this.#read();
    this.#journal = openSync(join(folder, "journal.jsonl"), "a");
    this.#compact(now);
  }

  get<Name extends TableName>(table: Name, id: string): Tables[Name] | undefined {
    return this.#table(table).get(id);
  }

  /** All rows, oldest first. */
  all<Name extends TableName>(table: Name): Tables[Name][] {
    return [...this.#table(table).values()];
  }

  /** Events that have not been taken, oldest first; kept apart so that finding them stays cheap. */
  pendingDeliveries(): Delivery[] {
    return [...this.#pending].flatMap((id) => this.get("deliveries", id) ?? []);
  }

  /** Writes the changes as one line of the journal, then makes them visible. */
  commit(changes: readonly Change[], now: number): void {
    if (changes.length === 0) return;
    const line = Buffer.from(`${JSON.stringify(changes)}\n`);
    let written = 0;
    while (written < line.length) written += writeSync(this.#journal, line, written);
    this.#journalBytes += line.length;
    for (const change of changes) this.#apply(change);
    if (this.#journalBytes > JOURNAL_LIMIT_BYTES) this.#compact(now);
  }

  close(): void {
    fsyncSync(this.#journal);
    closeSync(this.#journal);
  }

  #table<Name extends TableName>(table: Name): Map<string, Tables[Name]> {
    return this.#rows[table];
  }

  #apply(change: Change): void {
    const rows: Map<string, Tables[TableName]> = this.#rows[change[0]];
    rows.set(change[1].id, change[1]);
    if (change[0] !== "deliveries") return;
    if (change[1].state === "pending") this.#pending.add(change[1].id);
    else this.#pending.delete(change[1].id);
  }

  #read(): void {
    const state = this.#text("state.json");
    if (state) for (const change of JSON.parse(state) as Change[]) this.#apply(change);
    const journal = this.#text("journal.jsonl");
    // What follows the last line end was never finished.
    const whole = journal.slice(0, journal.lastIndexOf("\n") + 1);
    for (const line of whole.split("\n")) {
      if (line !== "") for (const change of JSON.parse(line) as Change[]) this.#apply(change);
    }
  }

  #text(name: string): string {
    try {
      return readFileSync(join(this.#folder, name), "utf8");
    } catch (error) {
      if (error instanceof Error && "code" in error && error.code === "ENOENT") return "";
      throw error;
    }
  }

  /**
   * Writes the whole state anew and empties the journal. Killed between the two, the next start reads
   * the journal over a state that already holds it, which changes nothing.
   */
  #compact(now: number): void {
    for (const [id, result] of this.#rows.results) {
      if (now - result.at >= RESULT_LIFE_MS) this.#rows.results.delete(id);
    }
    for (const [id, event] of this.#rows.events) {
      if (now - event.created * 1000 < EVENT_LIFE_MS) continue;
      if (this.#rows.deliveries.get(id)?.state === "pending") continue;
      this.#rows.events.delete(id);
      this.#rows.deliveries.delete(id);
    }
    const rows = TABLE_NAMES.flatMap((name) => this.all(name).map((row) => [name, row]));
    const draft = join(this.#folder, "state.json.new");
    const file = openSync(draft, "w");
    writeFileSync(file, JSON.stringify(rows));
    fsyncSync(file);
    closeSync(file);
    renameSync(draft, join(this.#folder, "state.json"));
    ftruncateSync(this.#journal);
    this.#journalBytes = 0;
  }
}

/** Changes that belong together. They are read back while they gather, and kept all at once or not at all. */
export class Changes {
  readonly #store: Store;
  readonly #pending = new Map<string, Change>();
  readonly now: number;
  /** The API request behind them, for the events they tell of. */
  readonly request: { id: string; idempotencyKey: string | null } | null;

  constructor(store: Store, now: number, request: Changes["request"] = null) {
    this.#store = store;
    this.now = now;
    this.request = request;
  }

  /** Now, in whole seconds, as Stripe writes times. */
  get seconds(): number {
    return Math.floor(this.now / 1000);
  }

  get<Name extends TableName>(table: Name, id: string): Tables[Name] | undefined {
    const change = this.#pending.get(`${table} ${id}`);
    return change ? (change[1] as Tables[Name]) : this.#store.get(table, id);
  }

  put(...change: Change): void {
    this.#pending.set(`${change[0]} ${change[1].id}`, change);
  }

  commit(): void {
    this.#store.commit([...this.#pending.values()], this.now);
    this.#pending.clear();
  }
}
