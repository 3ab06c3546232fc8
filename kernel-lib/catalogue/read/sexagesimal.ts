/** hours or degrees, minutes, seconds, as 12:34:56.7, 12 34 56.7 or 12h34m56.7s (d, ', " for degrees). */
const SEXAGESIMAL =
  /^([+-]?)(\d{1,3})(?:[:\s]|h\s*|d\s*|°\s*)(\d{1,2})(?:[:\s]|m\s*|['′]\s*)(\d{1,2}(?:\.\d*)?)(?:s|"|″)?$/;

/**
 * Degrees from texts such as `12:34:56.7`, or null when one of them is something else. Missing stays NaN.
 * @param isHours whether the first part counts hours of right ascension (15 degrees each)
 * @example degreesOf(['01:00:00', null], true) // => [15, NaN]
 */
export function degreesOf(texts: readonly (string | null)[], isHours: boolean): Float64Array | null {
  const out = new Float64Array(texts.length);
  let found = false;
  for (let i = 0; i < texts.length; i++) {
    const text = texts[i];
    if (text === null) {
      out[i] = Number.NaN;
      continue;
    }
    const match = SEXAGESIMAL.exec(text.trim());
    if (!match) return null;
    const [, sign, whole, minutes, seconds] = match;
    if (Number(minutes) >= 60 || Number(seconds) >= 60) return null;
    const value = ((Number(whole) * 60 + Number(minutes)) * 60 + Number(seconds)) / 3600;
    // The sign stands before the whole: -00:30:00 lies south.
    out[i] = (sign === '-' ? -value : value) * (isHours ? 15 : 1);
    found = true;
  }
  return found ? out : null;
}
