/** One thing that was done to a catalogue. */
export interface HistoryStep {
  /** What was done, in words with its numbers, for example `parallax / error >= 5`. */
  readonly action: string;
  readonly rowsBefore: number;
  readonly rowsAfter: number;
  /** What the reader should know: rows without a value, sentinels, assumptions. '' when nothing. */
  readonly note: string;
}

/** The history as lines of text. */
export function historyText(history: readonly HistoryStep[]): string {
  return history
    .map((s, i) => `${i + 1}. ${s.action}: ${s.rowsBefore} -> ${s.rowsAfter} rows${s.note ? ` (${s.note})` : ''}`)
    .join('\n');
}
