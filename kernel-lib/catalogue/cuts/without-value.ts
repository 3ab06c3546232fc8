/** The note of a cut on rows that have no value and so cannot pass it. '' when there are none. */
export function withoutValueNote(count: number, what: string): string {
  return count === 0
    ? ''
    : `${count} ${count === 1 ? 'row' : 'rows'} without ${what} ${count === 1 ? 'does' : 'do'} not pass`;
}
