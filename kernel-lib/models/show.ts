import { escapeHtml, htmlTable, type Presentation, textTable } from '../quantity/present';

const UNITS: Readonly<Record<string, string>> = {
  mass: 'solar masses',
  initialMass: 'solar masses',
  coreMass: 'solar masses',
  finalMass: 'solar masses',
  luminosity: 'solar',
  radius: 'solar radii',
  temperature: 'K',
  age: 'Gyr',
  logGravity: 'log cm/s2',
  metallicity: 'dex',
};

/** A number with five digits, as results show it. */
export function shown(value: unknown): string {
  return typeof value === 'number' ? String(Number(value.toPrecision(5))) : String(value);
}

/** How a record of numbers and words shows itself: a line for each, empty words left out. */
export function numbersPresentation(title: string, record: object): Presentation {
  const rows = () =>
    Object.entries(record)
      .filter(([, value]) => value !== '')
      .map(([key, value]) => [key, `${shown(value)} ${UNITS[key] ?? ''}`.trimEnd()]);
  return {
    text: () => `${title}\n${textTable(['', ''], rows()).replace(/^\s*\n/, '')}`,
    html: () => htmlTable(['quantity', 'value'], rows(), { caption: title }),
  };
}

/** How a record of equally long columns shows itself: the first rows and the count. */
export function columnsPresentation(title: string, record: object, most = 12): Presentation {
  const entries = Object.entries(record);
  const arrays = entries.filter(([, value]) => ArrayBuffer.isView(value)) as [string, Float64Array][];
  const n = arrays.reduce((longest, [, values]) => Math.max(longest, values.length), 0);
  const columns = arrays.filter(([, values]) => values.length === n);
  const rest = entries
    .filter(([, value]) => typeof value === 'number' || (typeof value === 'string' && value !== ''))
    .map(([key, value]) => `${key} ${shown(value)}`)
    .join('; ');
  const head = columns.map(([key]) => (UNITS[key] ? `${key} (${UNITS[key]})` : key));
  const rows = () => Array.from({ length: Math.min(n, most) }, (_, i) => columns.map(([, values]) => shown(values[i])));
  const more = n > most ? `... ${n} rows` : `${n} rows`;
  return {
    text: () => `${title}: ${rest}\n${textTable(head, rows())}\n${more}`,
    html: () =>
      `${htmlTable(head, rows(), { caption: `${title}: ${rest}`, numeric: head.map((_, j) => j) })}<div>${escapeHtml(more)}</div>`,
  };
}
