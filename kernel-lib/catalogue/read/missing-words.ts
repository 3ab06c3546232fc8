/** Words (lower case) that stand for "no value" in a column of numbers. */
export const MISSING_NUMBERS: ReadonlySet<string> = new Set([
  '',
  'nan',
  '-nan',
  'null',
  'none',
  'na',
  'n/a',
  'n.a.',
  '#n/a',
  '<na>',
  '-',
  '--',
  '---',
  '...',
  '\\n',
  'masked',
  'indef',
]);

/** Words (lower case) that stand for "no value" in a column of text, when not in quotes. */
export const MISSING_TEXTS: ReadonlySet<string> = new Set([
  '',
  'nan',
  'null',
  'na',
  'n/a',
  '#n/a',
  '<na>',
  '--',
  '\\n',
]);

/** The longest of these words, in bytes: a longer cell need not be looked up. */
export const LONGEST_MISSING_WORD = 6;
