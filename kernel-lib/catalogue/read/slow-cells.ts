import { LONGEST_MISSING_WORD, MISSING_NUMBERS, MISSING_TEXTS } from './missing-words';
import { isNumberText, isTooLongInteger, numberOf } from './parse-number';
import type { ScanLayout } from './scan-layout';
import { unclosedQuote } from './split-record';
import type { TextCells } from './text-cells';
import { lineOf, NEWLINE, QUOTE, RETURN, SPACE } from './text-lines';

/** Per-column counts that the slow way keeps. */
export interface Counts {
  badCount: number;
  firstBad: number;
  firstBadText: string;
  tooLong: number;
  quotedNumbers: number;
}

/** Cells that the fast way cannot take: quotes, spaces, words for missing, exponents, very long numbers, bad cells. */
export class SlowCells {
  /** Where the last cell ended: at a delimiter or a line end. */
  end = 0;
  #from = 0;
  #to = 0;
  #quoted = false;
  readonly #layout: ScanLayout;
  readonly #counts: readonly Counts[];
  /** In a single column an empty line is no cell, so that \\N stands for a missing text even where types are declared. */
  readonly #isAlone: boolean;
  /** The content of a quoted cell with doubled quotes made single. */
  #unquoted: Uint8Array = new Uint8Array(64);

  constructor(layout: ScanLayout, counts: readonly Counts[]) {
    this.#layout = layout;
    this.#counts = counts;
    this.#isAlone = layout.names.length === 1;
  }

  number(start: number, column: number): number {
    const source = this.#bounds(start);
    if (this.#to === this.#from) return Number.NaN;
    const text = latin(source, this.#from, this.#to).trim();
    const counts = this.#counts[column];
    if (isNumberText(text)) {
      if (isTooLongInteger(text)) counts.tooLong++;
      if (this.#quoted) counts.quotedNumbers++;
      return numberOf(text);
    }
    const word = text.toLowerCase();
    if (MISSING_NUMBERS.has(word) || this.#layout.missingWords[column].has(word)) return Number.NaN;
    if (counts.badCount++ === 0) {
      counts.firstBad = start;
      counts.firstBadText = new TextDecoder().decode(source.subarray(this.#from, this.#to));
    }
    return Number.NaN;
  }

  text(start: number, column: number, out: TextCells | null): void {
    const source = this.#bounds(start);
    if (out === null) return;
    if (!this.#quoted || this.#layout.quotesSayNothing) {
      const length = this.#to - this.#from;
      const words = this.#layout.missingWords[column];
      let isMissing = length === 0;
      if (!isMissing && (length <= LONGEST_MISSING_WORD || words.size > 0)) {
        const word = latin(source, this.#from, this.#to).toLowerCase();
        isMissing = (this.#layout.typed ? this.#isAlone && word === '\\n' : MISSING_TEXTS.has(word)) || words.has(word);
      }
      if (isMissing) {
        out.addMissing();
        return;
      }
    }
    out.add(source, this.#from, this.#to);
  }

  /** Finds the cell that starts at `start`: its content lies in the returned bytes from #from to #to. */
  #bounds(start: number): Uint8Array {
    const { bytes, delimiter } = this.#layout;
    let p = start;
    if (delimiter !== SPACE) while (bytes[p] === SPACE) p++;
    if (bytes[p] === QUOTE) return this.#quotedBounds(start, p + 1);
    const from = p;
    let c = bytes[p];
    while (c !== delimiter && c !== NEWLINE && c !== RETURN) c = bytes[++p];
    this.end = p;
    while (p > from && bytes[p - 1] === SPACE) p--;
    this.#from = from;
    this.#to = p;
    this.#quoted = false;
    return bytes;
  }

  #quotedBounds(start: number, from: number): Uint8Array {
    const { bytes, delimiter } = this.#layout;
    let p = from;
    let at = 0;
    let doubled = false;
    for (;;) {
      const close = bytes.indexOf(QUOTE, p);
      if (close < 0) throw unclosedQuote(this.#layout, start);
      if (bytes[close + 1] !== QUOTE) {
        if (doubled) at = this.#keep(p, close, at);
        p = close;
        break;
      }
      doubled = true;
      at = this.#keep(p, close + 1, at);
      p = close + 2;
    }
    this.#quoted = true;
    this.#from = doubled ? 0 : from;
    this.#to = doubled ? at : p;
    p++;
    if (delimiter !== SPACE) while (bytes[p] === SPACE) p++;
    const c = bytes[p];
    if (c !== delimiter && c !== NEWLINE && c !== RETURN) throw strayQuote(this.#layout, start);
    this.end = p;
    return doubled ? this.#unquoted : bytes;
  }

  #keep(from: number, to: number, at: number): number {
    const { bytes } = this.#layout;
    if (at + to - from > this.#unquoted.length) {
      const grown = new Uint8Array(2 * (at + to - from));
      grown.set(this.#unquoted.subarray(0, at));
      this.#unquoted = grown;
    }
    this.#unquoted.set(bytes.subarray(from, to), at);
    return at + to - from;
  }
}

function latin(bytes: Uint8Array, from: number, to: number): string {
  let text = '';
  for (let p = from; p < to && p < from + 400; p++) text += String.fromCharCode(bytes[p]);
  return text;
}

function strayQuote(layout: ScanLayout, start: number): Error {
  return new Error(
    `${layout.where}, line ${lineOf(layout.bytes, start)}: text follows a closing double quote. Double the quote ("") where it belongs to the text.`,
  );
}
