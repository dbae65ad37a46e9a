/**
 * As much of a TIFF's first directory as is needed to refuse what only looks like a scan. Layout: TIFF 6.0 (1992),
 * section 2; BigTIFF has 64-bit offsets and counts in their place.
 */

/** Reads bytes of the file; fewer than asked for where it ends. */
export type ReadAt = (offset: number, length: number) => Promise<Uint8Array>;

export type TiffDirectory = {
  /** The first picture in the file is a reduced version of another one (NewSubfileType, bit 0). */
  reduced: boolean;
  /** A digital negative of a camera (tag DNGVersion), which would be read as its small preview. */
  cameraRaw: boolean;
};

const NEW_SUBFILE_TYPE = 254;
const DNG_VERSION = 50_706;
/** Baseline readers may expect some tens; a directory of more than this is not believed. */
const MOST_ENTRIES = 4_096;

/** The first directory; null where the file ends before it or it makes no sense. */
export async function readTiffDirectory(read: ReadAt): Promise<TiffDirectory | null> {
  const head = view(await read(0, 16));
  if (head.byteLength < 16) return null;
  const little = head.getUint16(0) === 0x4949;
  const big = head.getUint16(2, little) === 43;
  const at = big ? safe(head.getBigUint64(8, little)) : head.getUint32(4, little);
  const [countBytes, entryBytes, valueAt] = big ? [8, 20, 12] : [2, 12, 8];

  const counted = view(await read(at, countBytes));
  if (counted.byteLength < countBytes) return null;
  const count = big ? safe(counted.getBigUint64(0, little)) : counted.getUint16(0, little);
  if (count < 1 || count > MOST_ENTRIES) return null;
  const entries = view(await read(at + countBytes, count * entryBytes));
  if (entries.byteLength < count * entryBytes) return null;

  const found: TiffDirectory = { reduced: false, cameraRaw: false };
  for (let i = 0; i < count; i++) {
    const tag = entries.getUint16(i * entryBytes, little);
    if (tag === DNG_VERSION) found.cameraRaw = true;
    if (tag === NEW_SUBFILE_TYPE) {
      found.reduced = (entries.getUint32(i * entryBytes + valueAt, little) & 1) === 1;
    }
  }
  return found;
}

function view(bytes: Uint8Array): DataView {
  return new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
}

function safe(value: bigint): number {
  return value > BigInt(Number.MAX_SAFE_INTEGER) ? Number.MAX_SAFE_INTEGER : Number(value);
}
