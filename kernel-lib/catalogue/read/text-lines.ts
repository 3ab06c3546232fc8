/** Bytes with a meaning in delimited text. */
export const NEWLINE = 10;
export const RETURN = 13;
export const SPACE = 32;
export const QUOTE = 34;

/** Offset after the line end that follows `from`. */
export function afterLine(bytes: Uint8Array, from: number): number {
  let p = from;
  while (p < bytes.length && bytes[p] !== NEWLINE && bytes[p] !== RETURN) p++;
  return bytes[p] === RETURN && bytes[p + 1] === NEWLINE ? p + 2 : p + 1;
}

/** Number of the line (from 1) on which a byte lies. */
export function lineOf(bytes: Uint8Array, offset: number): number {
  let line = 1;
  for (let p = 0; p < offset; p++) {
    if (bytes[p] === NEWLINE || (bytes[p] === RETURN && bytes[p + 1] !== NEWLINE)) line++;
  }
  return line;
}

/** Number of the first line from `start` on that is not UTF-8. */
export function lineNotUtf8(bytes: Uint8Array, start: number): number {
  const decoder = new TextDecoder('utf-8', { fatal: true });
  let i = start;
  try {
    while (i < bytes.length) {
      const next = afterLine(bytes, i);
      decoder.decode(bytes.subarray(i, next));
      i = next;
    }
  } catch {
    // This is the line.
  }
  return lineOf(bytes, i);
}
