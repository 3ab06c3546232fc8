import type { ScanLayout } from './scan-layout';
import { lineOf, NEWLINE, QUOTE, RETURN, SPACE } from './text-lines';

export interface RecordCell {
  readonly text: string;
  readonly quoted: boolean;
}

/**
 * One record cut into its cells, decoded, as the header and the first rows are looked at.
 * @returns the cells and the offset of the next record
 * @throws Error when a quote is not closed
 */
export function splitRecord(
  bytes: Uint8Array,
  start: number,
  delimiter: number,
  where: string,
): { cells: RecordCell[]; next: number } {
  const cells: RecordCell[] = [];
  const decoder = new TextDecoder('utf-8');
  let i = start;
  for (;;) {
    let p = i;
    if (delimiter !== SPACE) while (bytes[p] === SPACE) p++;
    if (bytes[p] === QUOTE) {
      const from = ++p;
      for (;;) {
        p = bytes.indexOf(QUOTE, p);
        if (p < 0) throw unclosedQuote({ bytes, where }, i);
        if (bytes[p + 1] !== QUOTE) break;
        p += 2;
      }
      cells.push({ text: decoder.decode(bytes.subarray(from, p)).replaceAll('""', '"'), quoted: true });
      p++;
      while (p < bytes.length && bytes[p] !== delimiter && bytes[p] !== NEWLINE && bytes[p] !== RETURN) p++;
    } else {
      const from = p;
      while (p < bytes.length && bytes[p] !== delimiter && bytes[p] !== NEWLINE && bytes[p] !== RETURN) p++;
      cells.push({ text: decoder.decode(bytes.subarray(from, p)).replace(/ +$/, ''), quoted: false });
    }
    if (p < bytes.length && bytes[p] === delimiter) {
      i = p + 1;
      continue;
    }
    return { cells, next: bytes[p] === RETURN && bytes[p + 1] === NEWLINE ? p + 2 : p + 1 };
  }
}

/** The error of a quote that is opened at `start`. */
export function unclosedQuote(layout: Pick<ScanLayout, 'bytes' | 'where'>, start: number): Error {
  return new Error(
    `${layout.where}, line ${lineOf(layout.bytes, start)}: a double quote is opened and never closed. Close it, or double it ("") where it belongs to the text.`,
  );
}
