import { checkNames } from './column-names';
import { type DeclaredKind, firstRecords, quote, readDelimitedColumns } from './delimited-columns';
import { MISSING_NUMBERS } from './missing-words';
import { isNumberText } from './parse-number';
import type { RawTable, ReadRequest } from './raw-table';
import type { ScanLayout } from './scan-layout';
import { type RecordCell, splitRecord } from './split-record';
import { withFinalLineEnd } from './text-bytes';
import { afterLine, lineOf } from './text-lines';

const HASH = 35;

/** Separators that are tried, with their names. */
const DELIMITERS: readonly (readonly [number, string])[] = [
  [44, 'comma'],
  [9, 'tab'],
  [59, 'semicolon'],
  [124, 'bar'],
];

/**
 * Comma- or tab-separated text with a line of column names on top. Lines that begin with # are comments; when no names
 * stand before the first data, the last comment is tried as the line of names. A line of dashes after the names ends a
 * block of units, as catalogue services write them.
 * @param given text bytes without byte-order mark
 * @param delimiter byte to use, or null to find it
 * @throws Error naming the line
 */
export function readCsv(given: Uint8Array, request: ReadRequest, delimiter: number | null): RawTable {
  const bytes = withFinalLineEnd(given);
  const { where } = request;
  const top = findTop(bytes);
  if (top === null) throw new Error(`${where}: the file is empty.`);
  const separator = delimiter ?? findDelimiter(bytes, top, where);
  const warnings: string[] = [];
  const header = findHeader(bytes, top, separator, request);
  const names = checkNames(header.names, header.line, request, warnings);
  const units = header.units ?? names.map(() => '');

  const start = header.start;
  const early = firstRecords({ bytes, start, delimiter: separator, comment: HASH, where }, 20);
  const layout: ScanLayout = {
    bytes,
    start,
    delimiter: separator,
    comment: HASH,
    names,
    quotesSayNothing: early.length > 0 && early.every((r) => r.every((c) => c.quoted)),
    missingWords: names.map((name) => request.missingWords(name)),
    where,
    typed: false,
  };
  const declared: DeclaredKind[] = names.map(() => 'any');
  const read = readDelimitedColumns(layout, declared, request);
  if (names.length === 1 && delimiter === null) {
    warnings.push(
      'Only one column was found: cells must be separated by commas, tabs, semicolons or bars (or pass format).',
    );
  }
  const separatorName = DELIMITERS.find(([byte]) => byte === separator)?.[1] ?? 'separator';
  return {
    form: `${separator === 9 ? 'TSV' : 'CSV'}, ${separatorName}-separated`,
    rowCount: read.rowCount,
    columns: names.map((name, j) => ({ name, values: read.columns[j], unit: units[j], description: '', ucd: '' })),
    warnings: [...warnings, ...read.warnings],
    meta: {},
  };
}

interface Top {
  /** Offset of the first line that is neither blank nor a comment; the end of the file when there is none. */
  readonly first: number;
  /** Offset of the last comment line before it, -1 for none. */
  readonly comment: number;
}

function findTop(bytes: Uint8Array): Top | null {
  let i = 0;
  let comment = -1;
  while (i < bytes.length) {
    const c = bytes[i];
    if (c === 10 || c === 13 || c === 32 || c === 9) {
      // A line of blanks only; a tab may be an empty first cell, so look at the whole line.
      const next = afterLine(bytes, i);
      if (!isBlank(bytes, i, next)) break;
      i = next;
    } else if (c === HASH) {
      comment = i;
      i = afterLine(bytes, i);
    } else break;
  }
  return i >= bytes.length && comment < 0 ? null : { first: i, comment };
}

function isBlank(bytes: Uint8Array, from: number, to: number): boolean {
  for (let p = from; p < to; p++) if (bytes[p] > 32) return false;
  return true;
}

/** The separator that cuts the line of names, and the lines after it, into most and equally many cells. */
function findDelimiter(bytes: Uint8Array, top: Top, where: string): number {
  let best = 44;
  let bestScore = -1;
  for (const [byte] of DELIMITERS) {
    const counts = cellCounts(bytes, top.first, byte, where);
    const cells = counts[0];
    const same = counts.filter((n) => n === cells).length / counts.length;
    const score = cells < 2 ? 0 : same + (cells > 2 ? 0.02 : 0) + Math.min(cells, 1000) * 1e-5;
    if (score > bestScore + 1e-9) {
      best = byte;
      bestScore = score;
    }
  }
  return best;
}

/** Cells in each of the first records; where a quote is not closed, in those before it, or in the first line as it stands. */
function cellCounts(bytes: Uint8Array, start: number, delimiter: number, where: string): number[] {
  const layout = { bytes, start, delimiter, comment: HASH, where };
  for (let most = 30; most > 0; most = Math.floor(most / 2)) {
    try {
      const records = firstRecords(layout, most);
      if (records.length > 0) return records.map((r) => r.length);
    } catch {
      // Fewer records may end before the broken one.
    }
  }
  const line = bytes.subarray(start, afterLine(bytes, start));
  return [line.filter((c) => c === delimiter).length + 1];
}

interface Header {
  readonly names: readonly string[];
  readonly line: number;
  readonly units: readonly string[] | null;
  /** Where the data begin. */
  readonly start: number;
}

function findHeader(bytes: Uint8Array, top: Top, delimiter: number, request: ReadRequest): Header {
  const { where } = request;
  const isData = (cells: readonly RecordCell[]) =>
    cells.some((c) => isNumberText(c.text.trim())) &&
    cells.every((c) => !c.quoted) &&
    cells.every((c) => isNumberText(c.text.trim()) || MISSING_NUMBERS.has(c.text.trim().toLowerCase()));
  if (top.first >= bytes.length) {
    throw new Error(`${where}: the file holds only comments, no rows of data.`);
  }
  const first = splitRecord(bytes, top.first, delimiter, where);
  const line = lineOf(bytes, top.first);
  if (isData(first.cells)) {
    if (request.columnNames) {
      checkCount(request.columnNames, first.cells.length, where);
      return { names: request.columnNames, line, units: null, start: top.first };
    }
    if (top.comment >= 0) {
      const commented = splitRecord(bytes, top.comment + 1, delimiter, where).cells;
      if (commented.length === first.cells.length && commented.every((c) => c.text.trim() !== '')) {
        const names = commented.map((c) => c.text.trim());
        return { names, line: lineOf(bytes, top.comment), units: null, start: top.first };
      }
    }
    const shown = first.cells
      .slice(0, 4)
      .map((c) => c.text)
      .join(', ');
    throw new Error(
      `${where}, line ${line}: expected column names, found numbers (${quote(shown)}). Put a line of names on top, or pass columnNames: ['...'] with ${first.cells.length} names.`,
    );
  }
  const found = first.cells.map((c) => (c.quoted ? c.text : c.text.trim()));
  if (request.columnNames) checkCount(request.columnNames, found.length, where);
  return {
    names: request.columnNames ?? found,
    line,
    ...afterHeader(bytes, first.next, delimiter, found.length, where),
  };
}

function checkCount(names: readonly string[], columns: number, where: string): void {
  if (names.length === columns) return;
  throw new Error(`${where}: columnNames has ${names.length} names, the file has ${columns} columns.`);
}

/** Units between the names and a line of dashes, if there is one among the next three lines. */
function afterHeader(
  bytes: Uint8Array,
  next: number,
  delimiter: number,
  count: number,
  where: string,
): { units: readonly string[] | null; start: number } {
  let i = next;
  let units: readonly string[] | null = null;
  for (let k = 0; k < 3 && i < bytes.length; k++) {
    if (!isPlainLine(bytes, i)) break;
    const record = splitRecord(bytes, i, delimiter, where);
    if (record.cells.length === count && record.cells.every((c) => /^-{2,}$|^-+$/.test(c.text.trim()))) {
      const isRow = k === 0 && record.cells.every((c) => c.text.trim().length <= 2);
      return isRow ? { units: null, start: next } : { units, start: record.next };
    }
    if (record.cells.length === count && k === 0) units = record.cells.map((c) => c.text.trim());
    i = record.next;
  }
  return { units: null, start: next };
}

function isPlainLine(bytes: Uint8Array, from: number): boolean {
  const end = afterLine(bytes, from);
  return !bytes.subarray(from, end).includes(34);
}
