/** A delimited file as the scan sees it. */
export interface ScanLayout {
  /** Bytes of the whole file, ending with a line end. */
  readonly bytes: Uint8Array;
  /** Where the rows begin. */
  readonly start: number;
  /** Byte that separates cells. */
  readonly delimiter: number;
  /** Byte that begins a comment line, -1 for none. */
  readonly comment: number;
  readonly names: readonly string[];
  /** Whether a quoted word for missing, or a quoted nothing, is missing too. */
  readonly quotesSayNothing: boolean;
  /** Extra words for missing, a set a column. */
  readonly missingWords: readonly ReadonlySet<string>[];
  /** How messages begin. */
  readonly where: string;
  /** Whether the file declares types, so that an unquoted NA in a text column is a text. */
  readonly typed: boolean;
}
