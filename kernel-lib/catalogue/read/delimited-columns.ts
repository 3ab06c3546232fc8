import type { ColumnValues } from '../columns';
import { type ScanKind, type ScannedColumn, scanDelimited } from './delimited-scan';
import { MISSING_NUMBERS } from './missing-words';
import { isNumberText, isTooLongInteger } from './parse-number';
import type { ReadRequest } from './raw-table';
import type { ScanLayout } from './scan-layout';
import { type RecordCell, splitRecord } from './split-record';
import { lineOf } from './text-lines';

/** What the file declares about a column's type; 'any' where it says nothing. */
export type DeclaredKind = 'any' | 'number' | 'integer' | 'text' | 'boolean';

const SAMPLE_ROWS = 200;
/** In a column without declared type, this share of text among the cells makes it a text column. */
const TEXT_SHARE = 0.2;

/**
 * Rows of a delimited file as typed columns. A column without declared type holds numbers when all its cells do, text
 * when more than a fifth of them do not; in between the odd cells are taken for mistakes and are named.
 * @throws Error naming file, line, column and value of a bad cell
 */
export function readDelimitedColumns(
  layout: ScanLayout,
  declared: readonly DeclaredKind[],
  request: ReadRequest,
): { rowCount: number; columns: ColumnValues[]; warnings: string[] } {
  const warnings: string[] = [];
  const asText = new Set(request.text);
  const guesses = guessKinds(layout);
  const kinds: ScanKind[] = declared.map((kind, j) => {
    if (asText.has(layout.names[j])) return 'text';
    if (kind === 'any') return guesses[j].kind;
    return kind === 'text' || kind === 'boolean' ? 'text' : 'number';
  });
  const scan = scanDelimited(layout, kinds);
  if (scan.rowCount === 0) {
    throw new Error(`${layout.where}: the file has column names but no rows of data.`);
  }
  if (scan.rowComments > 0) {
    warnings.push(
      `${scan.rowComments} ${scan.rowComments === 1 ? 'line that begins' : 'lines that begin'} with # among the rows ${scan.rowComments === 1 ? 'is' : 'are'} taken as comments (first on line ${lineOf(layout.bytes, scan.firstRowComment)}). If they are rows, put the first cell in double quotes.`,
    );
  }
  const columns: (ColumnValues | null)[] = scan.columns.map((column, j) => {
    if (column.numbers === null) return column.texts;
    return keepsNumbers(layout, column, declared[j], j, request, warnings) ? column.numbers : null;
  });
  const readAgain = kinds.map((kind, j): ScanKind => {
    if (columns[j] === null) return 'text';
    const doubtful = kind === 'text' && declared[j] === 'any' && guesses[j].hasNumbers && !asText.has(layout.names[j]);
    return doubtful && isMostlyNumbers(columns[j] as readonly (string | null)[]) ? 'number' : 'skip';
  });
  if (readAgain.some((kind) => kind !== 'skip')) {
    scanDelimited(layout, readAgain).columns.forEach((column, j) => {
      if (column.texts !== null) columns[j] = column.texts;
      else if (column.numbers !== null && keepsNumbers(layout, column, declared[j], j, request, warnings)) {
        columns[j] = column.numbers;
      }
    });
  }
  const settled = columns.map((values, j) => {
    if (values instanceof Float64Array || asText.has(layout.names[j])) return values as ColumnValues;
    const texts = values as (string | null)[];
    if (declared[j] === 'any' && guesses[j].hasNumbers) noteMixed(layout.names[j], texts, warnings);
    return settleText(layout, texts, declared[j], j);
  });
  return { rowCount: scan.rowCount, columns: settled, warnings };
}

interface Guess {
  readonly kind: 'number' | 'text';
  /** Whether there were numbers among the cells looked at. */
  readonly hasNumbers: boolean;
}

/** Number or text, by the first rows and some from further down. */
function guessKinds(layout: ScanLayout): Guess[] {
  const texts = new Int32Array(layout.names.length);
  const cells = new Int32Array(layout.names.length);
  const tooLong = new Uint8Array(layout.names.length);
  for (const record of [...firstRecords(layout, SAMPLE_ROWS), ...laterRecords(layout)]) {
    record.forEach((cell, j) => {
      if (j >= texts.length) return;
      const text = cell.text.trim();
      const word = text.toLowerCase();
      if (MISSING_NUMBERS.has(word) || layout.missingWords[j].has(word)) return;
      cells[j]++;
      if (!isNumberText(text)) texts[j]++;
      else if (isTooLongInteger(text)) tooLong[j] = 1;
    });
  }
  return layout.names.map((_, j) => ({
    kind: tooLong[j] === 1 || texts[j] > TEXT_SHARE * cells[j] ? 'text' : 'number',
    hasNumbers: tooLong[j] === 0 && cells[j] > texts[j],
  }));
}

/** Some records from the middle of the file. A quoted line end may put them out of step; those of a wrong length are left out. */
function laterRecords(layout: ScanLayout): RecordCell[][] {
  const { bytes, start } = layout;
  if (bytes.length - start < 1 << 14) return [];
  return [0.2, 0.4, 0.6, 0.8].flatMap((part) => {
    const from = nextLine(bytes, start + Math.floor(part * (bytes.length - start)));
    try {
      return firstRecords({ ...layout, start: from }, SAMPLE_ROWS / 4).filter((r) => r.length === layout.names.length);
    } catch {
      return [];
    }
  });
}

/** The first records that hold data. */
export function firstRecords(
  layout: Pick<ScanLayout, 'bytes' | 'start' | 'delimiter' | 'comment' | 'where'>,
  most: number,
): RecordCell[][] {
  const { bytes, delimiter, comment, where } = layout;
  const records: RecordCell[][] = [];
  let i = layout.start;
  while (i < bytes.length && records.length < most) {
    if (bytes[i] === 10 || bytes[i] === 13) {
      i++;
      continue;
    }
    const isComment = bytes[i] === comment;
    const record = splitRecord(bytes, i, delimiter, where);
    i = isComment ? nextLine(bytes, i) : record.next;
    if (!isComment) records.push(record.cells);
  }
  return records;
}

function nextLine(bytes: Uint8Array, from: number): number {
  let p = from;
  while (p < bytes.length && bytes[p] !== 10 && bytes[p] !== 13) p++;
  return p + 1;
}

/** Whether a column read as numbers stays one; false sends it back to be read as text. */
function keepsNumbers(
  layout: ScanLayout,
  column: ScannedColumn,
  declared: DeclaredKind,
  j: number,
  request: ReadRequest,
  warnings: string[],
): boolean {
  const name = layout.names[j];
  // A double would change the last digits, and two stars would share a number.
  if (column.tooLong > 0 && declared !== 'number') return false;
  if (column.badCount === 0) return true;
  let numbers = 0;
  for (const v of column.numbers as Float64Array) if (!Number.isNaN(v)) numbers++;
  const cells = numbers + column.badCount;
  if (declared === 'any') {
    if (column.badCount > TEXT_SHARE * cells) return false;
    // A writer that quotes text only: numbers in quotes beside words are text too.
    if (column.quotedNumbers === numbers) return false;
  }
  badCell(layout, name, column.firstBadText, column.firstBad, column.badCount, request, warnings);
  return true;
}

function badCell(
  layout: ScanLayout,
  name: string,
  text: string,
  offset: number,
  count: number,
  request: ReadRequest,
  warnings: string[],
): void {
  const what = `${count === 1 ? 'one cell is' : `${count} cells are`} not a number`;
  const line = lineOf(layout.bytes, offset);
  if (request.badCells === 'missing') {
    warnings.push(
      `Column "${name}": ${what} and ${count === 1 ? 'is' : 'are'} taken as missing (first on line ${line}: ${quote(text)}).`,
    );
    return;
  }
  throw new Error(
    `${layout.where}, line ${line}, column "${name}": ${quote(text)} is not a number` +
      `${count > 1 ? ` (and ${count - 1} more in this column)` : ''}. ` +
      `If it means that there is no value, pass missing: { ${optionKey(name)}: [${quote(text)}] }; ` +
      `badCells: 'missing' takes every such cell as missing; text: [${JSON.stringify(name)}] keeps the column as text.`,
  );
}

/** Whether a column that was read as text should be read as numbers after all. */
function isMostlyNumbers(texts: readonly (string | null)[]): boolean {
  const { numbers, words, tooLong } = countKinds(texts);
  return !tooLong && numbers > 0 && words <= TEXT_SHARE * (numbers + words);
}

/** Says so when a column that is text holds mostly numbers. */
function noteMixed(name: string, texts: readonly (string | null)[], warnings: string[]): void {
  const { numbers, words, first, tooLong } = countKinds(texts);
  if (tooLong || words === 0 || numbers <= words) return;
  warnings.push(
    `Column "${name}" is read as text: ${words} of its ${texts.length} cells are not numbers (first in row ${first + 1}: ${quote(String(texts[first]))}).`,
  );
}

function countKinds(texts: readonly (string | null)[]): {
  numbers: number;
  words: number;
  first: number;
  tooLong: boolean;
} {
  let numbers = 0;
  let words = 0;
  let first = -1;
  let tooLong = false;
  for (let i = 0; i < texts.length; i++) {
    const text = texts[i];
    if (text === null || MISSING_NUMBERS.has(text.trim().toLowerCase())) continue;
    if (isNumberText(text.trim())) {
      numbers++;
      tooLong ||= isTooLongInteger(text.trim());
    } else if (words++ === 0) first = i;
  }
  return { numbers, words, first, tooLong };
}

/** A text column: booleans where every cell is true or false. */
function settleText(layout: ScanLayout, texts: (string | null)[], declared: DeclaredKind, j: number): ColumnValues {
  if (declared === 'text') return texts;
  const logical = asBooleans(texts);
  if (declared === 'boolean' && logical === null && texts.some((t) => t !== null)) {
    const wrong = texts.findIndex((t) => t !== null && !/^(?:true|false)$/i.test(t));
    throw new Error(
      `${layout.where}, row ${wrong + 1}, column "${layout.names[j]}": ${quote(String(texts[wrong]))} is neither True nor False, as the header declares.`,
    );
  }
  return logical ?? texts;
}

function asBooleans(texts: readonly (string | null)[]): (boolean | null)[] | null {
  const out: (boolean | null)[] = [];
  for (const t of texts) {
    if (t === null) out.push(null);
    else if (t === 'True' || t === 'true' || t === 'TRUE') out.push(true);
    else if (t === 'False' || t === 'false' || t === 'FALSE') out.push(false);
    else return null;
  }
  return out.some((v) => v !== null) ? out : null;
}

/** A cell as messages show it. */
export function quote(text: string): string {
  return JSON.stringify(text.length > 60 ? `${text.slice(0, 57)}...` : text);
}

/** A column or role name as the key of an option in an example. */
export function optionKey(name: string): string {
  return /^[A-Za-z_$][\w$]*$/.test(name) ? name : JSON.stringify(name);
}
