/** Bytes made small and known by their hash; a packed piece that was touched does not come out again. */
import { createHash } from 'node:crypto';
import { gunzipSync, gzipSync } from 'node:zlib';

/** Largest original that comes out, bytes: what the program reads of a sweep. */
const MOST_UNPACKED_BYTES = 256 * 1024 * 1024;

/** SHA-256, 64 hexadecimal digits. */
export function hashOf(bytes: Uint8Array | string): string {
  return createHash('sha256').update(bytes).digest('hex');
}

export function pack(bytes: Uint8Array | string): Uint8Array {
  return gzipSync(bytes);
}

/** @returns The bytes that were packed; null when they are damaged. */
export function unpack(packed: unknown): Uint8Array | null {
  if (!(packed instanceof Uint8Array)) return null;
  try {
    return gunzipSync(packed, { maxOutputLength: MOST_UNPACKED_BYTES });
  } catch {
    return null;
  }
}

/** The text that was packed; null when it is damaged. */
export function unpackText(packed: unknown): string | null {
  const bytes = unpack(packed);
  return bytes && new TextDecoder('utf-8').decode(bytes);
}
