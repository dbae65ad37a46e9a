import { crc32 as nativeCrc32 } from "node:zlib";

/*
 * Cyclic redundancy checks in the reflected form with all bits set before and inverted after, which CRC-32
 * (ITU-T V.42), CRC-32C (RFC 3720) and the 64-bit check of the NVM Express specification all share.
 */

export type CrcName = "crc32" | "crc32c" | "crc64nvme";

interface CrcDefinition {
  width: 32 | 64;
  /** The polynomial without its highest term, bits reversed. */
  polynomial: bigint;
}

const DEFINITIONS: Readonly<Record<CrcName, CrcDefinition>> = {
  crc32: { width: 32, polynomial: 0xedb88320n },
  crc32c: { width: 32, polynomial: 0x82f63b78n },
  crc64nvme: { width: 64, polynomial: 0x9a6c9329ac4bc9b5n },
};

export interface Crc {
  update(data: Buffer): void;
  /** The check value of all data so far, most significant byte first. */
  digest(): Buffer;
}

export function createCrc(name: CrcName): Crc {
  if (name === "crc32") return new NativeCrc32();
  return name === "crc32c" ? new TableCrc32(tablesOf("crc32c")) : new TableCrc64(tablesOf("crc64nvme"));
}

class NativeCrc32 implements Crc {
  private value = 0;

  update(data: Buffer): void {
    this.value = nativeCrc32(data, this.value);
  }

  digest(): Buffer {
    const bytes = Buffer.alloc(4);
    bytes.writeUInt32BE(this.value);
    return bytes;
  }
}

/** How many bytes one step takes. Eight tables let a step take eight, about five times as fast as one at a time. */
const STRIDE = 8;

/** `low[k * 256 + b]` (and `high` for 64 bits): the effect of byte b seen k bytes before the end of a step. */
interface CrcTables {
  low: Uint32Array;
  high: Uint32Array;
}

const tablesByName = new Map<CrcName, CrcTables>();

function tablesOf(name: CrcName): CrcTables {
  let tables = tablesByName.get(name);
  if (!tables) {
    tables = makeTables(DEFINITIONS[name].polynomial);
    tablesByName.set(name, tables);
  }
  return tables;
}

function makeTables(polynomial: bigint): CrcTables {
  const low = new Uint32Array(STRIDE * 256);
  const high = new Uint32Array(STRIDE * 256);
  const firstRow: bigint[] = [];
  for (let byte = 0; byte < 256; byte++) {
    let value = BigInt(byte);
    for (let bit = 0; bit < 8; bit++) value = value & 1n ? (value >> 1n) ^ polynomial : value >> 1n;
    firstRow.push(value);
  }
  let row = firstRow;
  for (let distance = 0; distance < STRIDE; distance++) {
    row.forEach((value, byte) => {
      low[distance * 256 + byte] = Number(value & 0xffffffffn);
      high[distance * 256 + byte] = Number(value >> 32n);
    });
    row = row.map((value) => (value >> 8n) ^ (firstRow[Number(value & 0xffn)] ?? 0n));
  }
  return { low, high };
}

/** Reads a table at an index that is always inside it; the fallback only tells the compiler so. */
function at(table: Uint32Array, distance: number, byte: number): number {
  return table[distance * 256 + (byte & 0xff)] ?? 0;
}

class TableCrc32 implements Crc {
  private value = 0xffffffff;

  constructor(private readonly tables: CrcTables) {}

  update(data: Buffer): void {
    const table = this.tables.low;
    let value = this.value;
    let offset = 0;
    for (; offset + STRIDE <= data.length; offset += STRIDE) {
      const first = value ^ data.readUInt32LE(offset);
      const second = data.readUInt32LE(offset + 4);
      value =
        at(table, 7, first) ^
        at(table, 6, first >>> 8) ^
        at(table, 5, first >>> 16) ^
        at(table, 4, first >>> 24) ^
        at(table, 3, second) ^
        at(table, 2, second >>> 8) ^
        at(table, 1, second >>> 16) ^
        at(table, 0, second >>> 24);
    }
    for (; offset < data.length; offset++) {
      value = (value >>> 8) ^ at(table, 0, value ^ data.readUInt8(offset));
    }
    this.value = value;
  }

  digest(): Buffer {
    const bytes = Buffer.alloc(4);
    bytes.writeUInt32BE(~this.value >>> 0);
    return bytes;
  }
}

class TableCrc64 implements Crc {
  private low = 0xffffffff;
  private high = 0xffffffff;

  constructor(private readonly tables: CrcTables) {}

  update(data: Buffer): void {
    const lowTable = this.tables.low;
    const highTable = this.tables.high;
    let low = this.low;
    let high = this.high;
    let offset = 0;
    for (; offset + STRIDE <= data.length; offset += STRIDE) {
      const first = low ^ data.readUInt32LE(offset);
      const second = high ^ data.readUInt32LE(offset + 4);
      low =
        at(lowTable, 7, first) ^
        at(lowTable, 6, first >>> 8) ^
        at(lowTable, 5, first >>> 16) ^
        at(lowTable, 4, first >>> 24) ^
        at(lowTable, 3, second) ^
        at(lowTable, 2, second >>> 8) ^
        at(lowTable, 1, second >>> 16) ^
        at(lowTable, 0, second >>> 24);
      high =
        at(highTable, 7, first) ^
        at(highTable, 6, first >>> 8) ^
        at(highTable, 5, first >>> 16) ^
        at(highTable, 4, first >>> 24) ^
        at(highTable, 3, second) ^
        at(highTable, 2, second >>> 8) ^
        at(highTable, 1, second >>> 16) ^
        at(highTable, 0, second >>> 24);
    }
    for (; offset < data.length; offset++) {
      const index = low ^ data.readUInt8(offset);
      low = ((low >>> 8) | (high << 24)) ^ at(lowTable, 0, index);
      high = (high >>> 8) ^ at(highTable, 0, index);
    }
    this.low = low;
    this.high = high;
  }

  digest(): Buffer {
    const bytes = Buffer.alloc(8);
    bytes.writeUInt32BE(~this.high >>> 0);
    bytes.writeUInt32BE(~this.low >>> 0, 4);
    return bytes;
  }
}

/**
 * The check value of two pieces joined, from the values of the pieces: the first is multiplied by x to the power of
 * the second's length in bits, modulo the polynomial, and the second added. Nothing is read again.
 * @param secondLength bytes in the second piece
 */
export function combineCrc(name: CrcName, first: Buffer, second: Buffer, secondLength: number): Buffer {
  const { width, polynomial } = DEFINITIONS[name];
  const one = 1n << BigInt(width - 1);
  // x^8, one byte's worth; in reflected form the power of x counts down from the highest bit.
  let square = one >> 8n;
  let shift = one;
  for (let remaining = secondLength; remaining > 0; remaining = Math.floor(remaining / 2)) {
    if (remaining % 2 === 1) shift = multiply(shift, square, polynomial, one);
    square = multiply(square, square, polynomial, one);
  }
  const combined = multiply(toBigInt(first), shift, polynomial, one) ^ toBigInt(second);
  return Buffer.from(combined.toString(16).padStart(width / 4, "0"), "hex");
}

function multiply(a: bigint, b: bigint, polynomial: bigint, one: bigint): bigint {
  let product = 0n;
  let term = b;
  for (let mask = one; mask > 0n; mask >>= 1n) {
    if (a & mask) product ^= term;
    term = term & 1n ? (term >> 1n) ^ polynomial : term >> 1n;
  }
  return product;
}

function toBigInt(bytes: Buffer): bigint {
  return BigInt(`0x${bytes.toString("hex")}`);
}
