/**
 * Refuses option names that a function does not know, so that a misspelt option is never ignored in silence.
 * @param caller name of the public function, for the message
 * @param given  the options object as the user wrote it
 * @param known  every name the function takes
 * @throws TypeError naming the unknown option, the nearest known one and all known ones
 */
export function checkOptions(caller: string, given: object | undefined, known: readonly string[]): void {
  if (given === undefined) return;
  if (given === null || typeof given !== 'object' || Array.isArray(given)) {
    throw new TypeError(`${caller}: options must be an object such as { ${known[0]}: ... }, got ${describe(given)}.`);
  }
  for (const key of Object.keys(given)) {
    if (known.includes(key)) continue;
    const near = nearest(key, known);
    const hint = near ? ` Did you mean "${near}"?` : '';
    throw new TypeError(`${caller}: unknown option "${key}".${hint} Known options: ${known.join(', ')}.`);
  }
}

/**
 * Refuses a number that is not finite or lies outside its range.
 * @throws RangeError that shows caller, name, value, range and unit
 */
export function checkRange(caller: string, name: string, value: number, low: number, high: number, unit = ''): void {
  if (typeof value === 'number' && value >= low && value <= high) return;
  const tail = unit === '' ? '' : ` ${unit}`;
  throw new RangeError(`${caller}: ${name} must lie in ${low} to ${high}${tail}, got ${describe(value)}.`);
}

/**
 * Refuses a word that is not among the choices.
 * @throws TypeError that shows caller, name, value and every choice
 */
export function checkChoice<T extends string>(caller: string, name: string, value: T, choices: readonly T[]): void {
  if (choices.includes(value)) return;
  throw new TypeError(`${caller}: ${name} is ${describe(value)}; choose one of ${choices.join(', ')}.`);
}

/** A short, safe picture of any value for an error message. */
export function describe(value: unknown): string {
  if (typeof value === 'string') return JSON.stringify(value.length > 60 ? value.slice(0, 57) + '...' : value);
  if (typeof value === 'number' || typeof value === 'boolean' || value == null) return String(value);
  if (Array.isArray(value) || ArrayBuffer.isView(value)) return `an array of ${(value as ArrayLike<unknown>).length}`;
  return typeof value === 'function' ? 'a function' : 'an object';
}

/** The choice within two edits (a third of a long word) of what was written, or null. */
export function nearest(word: string, choices: readonly string[]): string | null {
  let best: string | null = null;
  let bestDistance = Math.max(2, Math.floor(word.length / 3)) + 1;
  for (const choice of choices) {
    const distance = editDistance(word.toLowerCase(), choice.toLowerCase());
    if (distance < bestDistance) {
      best = choice;
      bestDistance = distance;
    }
  }
  return best;
}

function editDistance(a: string, b: string): number {
  let row = Array.from({ length: b.length + 1 }, (_, j) => j);
  for (let i = 1; i <= a.length; i++) {
    const next = [i];
    for (let j = 1; j <= b.length; j++) {
      next.push(Math.min(row[j] + 1, next[j - 1] + 1, row[j - 1] + (a[i - 1] === b[j - 1] ? 0 : 1)));
    }
    row = next;
  }
  return row[b.length];
}
