const PAGE = 4096;

/**
 * A copy of `damaged` with the first page of `fresh`, its counts set to what is there. Null where the
 * damaged file holds not even a second page.
 */
export function pageOneOf(fresh: Uint8Array, damaged: Uint8Array): Uint8Array | null {
  const pages = Math.ceil(damaged.length / PAGE);
  if (pages < 2) return null;
  const mended = Buffer.alloc(pages * PAGE);
  mended.set(damaged);
  mended.set(fresh.subarray(0, PAGE));
  mended.writeUInt32BE(pages, 28); // how many pages the file has
  mended.writeUInt32BE(0, 32); // no list of free pages
  mended.writeUInt32BE(0, 36);
  mended.copy(mended, 92, 24, 28); // the count of pages is of this writing
  return mended;
}
