import { sha256 } from '@noble/hashes/sha2.js';
import { bytesToHex } from '@noble/hashes/utils.js';

const chunk = 4 * 1024 * 1024;

/** SHA-256 of a file as hex, read chunk by chunk so that a card of large files never stands in memory at once. */
export async function hashFile(file: Blob, signal?: AbortSignal): Promise<string> {
  const hash = sha256.create();
  for (let start = 0; start < file.size; start += chunk) {
    signal?.throwIfAborted();
    hash.update(new Uint8Array(await file.slice(start, start + chunk).arrayBuffer()));
  }
  return bytesToHex(hash.digest());
}
