import type { ColumnData } from '../columns';
import { MISSING_NUMBERS, MISSING_TEXTS } from '../read/missing-words';
import { isNumberText } from '../read/parse-number';

/** Cells gathered before they are encoded. */
const PART = 1 << 16;

/** How cells are written. */
export interface DelimitedStyle {
  readonly delimiter: ',' | '\t';
  readonly booleans: readonly [string, string];
}

/**
 * Names and rows as delimited text, a part at a time. Numbers are the shortest text that reads back as the same double;
 * missing is an empty cell, an empty text is `""`, and a text that a reader would take for a number or for missing is
 * quoted.
 */
export function* delimitedRows(
  columns: readonly ColumnData[],
  rowCount: number,
  style: DelimitedStyle,
): Generator<Uint8Array> {
  const encoder = new TextEncoder();
  const { delimiter, booleans } = style;
  const alone = columns.length === 1;
  let text = `${columns.map((c) => quoted(c.name, true)).join(delimiter)}\n`;
  for (let i = 0; i < rowCount; i++) {
    for (let j = 0; j < columns.length; j++) {
      if (j > 0) text += delimiter;
      const { values } = columns[j];
      const v = values[i];
      if (typeof v === 'number') text += numberCell(v, alone);
      else if (typeof v === 'string') text += quoted(v, false);
      // A line with nothing on it would be passed over.
      else if (v === null) text += alone ? '\\N' : '';
      else text += booleans[v ? 1 : 0];
    }
    text += '\n';
    if (text.length > PART) {
      yield encoder.encode(text);
      text = '';
    }
  }
  yield encoder.encode(text);
}

function numberCell(v: number, alone: boolean): string {
  if (Number.isNaN(v)) return alone ? 'nan' : '';
  if (v === Number.POSITIVE_INFINITY) return 'inf';
  if (v === Number.NEGATIVE_INFINITY) return '-inf';
  return Object.is(v, -0) ? '-0' : String(v);
}

/** Quoted where it must be, also for the separators of other tables, so that the separator can be told from the text. */
function quoted(text: string, isName: boolean): string {
  const plain =
    !/[",;|\t\r\n]|^\s|\s$|^#/.test(text) &&
    !isNumberText(text) &&
    (isName ? text !== '' : !isMissingWord(text.toLowerCase()));
  return plain ? text : `"${text.replaceAll('"', '""')}"`;
}

function isMissingWord(word: string): boolean {
  return MISSING_TEXTS.has(word) || MISSING_NUMBERS.has(word);
}
