import type { Measured } from '../quantity/measured';
import { checkOptions } from '../quantity/options';
import { escapeHtml, htmlTable, presentable, textTable } from '../quantity/present';

/** What a summary is made from: the results of the steps, as they came. */
export interface ClusterSummaryParts {
  /** Name of the cluster, for the title. */
  name?: string;
  /** From findMembers: anything with the expected number of members. */
  members: { readonly expectedCount: Measured };
  /** From clusterDistance. */
  distance: { readonly parallax: Measured; readonly distance: Measured; readonly modulus: Measured };
  /** E(B-V) in mag, from estimateReddening or the literature. */
  reddening: Measured;
  /** From turnoffAge. */
  age: { readonly age: Measured; readonly turnoffMass: Measured; readonly notes?: readonly string[] };
  /** [Fe/H] that was assumed, dex. */
  metallicity?: number;
}

/** The numbers of an analysis side by side, with what they leave out. */
export interface ClusterSummary {
  readonly name: string;
  readonly members: Measured;
  readonly distance: Measured;
  readonly modulus: Measured;
  readonly reddening: Measured;
  readonly turnoffMass: Measured;
  readonly age: Measured;
  readonly metallicity: number;
  /** What a reader must know before quoting the numbers. */
  readonly caveats: readonly string[];
  /** The numbers in one line, beginning with `Result: `. */
  readonly line: string;
}

/**
 * Gathers the results of an analysis into one line and one table, with 68 % intervals and what they do not include.
 * @param parts results of findMembers, clusterDistance, estimateReddening and turnoffAge
 * @throws TypeError on an unknown or missing part
 * @example clusterSummary({ name: 'Ostrava 3', members, distance, reddening, age }).line
 */
export function clusterSummary(parts: ClusterSummaryParts): ClusterSummary {
  checkOptions('clusterSummary', parts, ['name', 'members', 'distance', 'reddening', 'age', 'metallicity']);
  for (const key of ['members', 'distance', 'reddening', 'age'] as const) {
    if (parts[key] == null) throw new TypeError(`clusterSummary: ${key} is missing; pass the result of that step.`);
  }
  const { name = 'Cluster', members, distance, reddening, age, metallicity = 0 } = parts;
  const rows: [string, Measured][] = [
    ['members', members.expectedCount],
    ['parallax', distance.parallax],
    ['distance', distance.distance],
    ['distance modulus', distance.modulus],
    ['E(B-V)', reddening],
    ['turnoff mass', age.turnoffMass],
    ['age', age.age],
  ];
  const line =
    `Result: ${members.expectedCount} members; distance ${distance.distance}; E(B-V) ${reddening}; ` +
    `turnoff mass ${age.turnoffMass}; age ${age.age} (each with its 68 % interval)`;
  const caveats = [
    `[Fe/H] ${metallicity === 0 ? '0 (solar)' : metallicity} was assumed, not measured; 0.1 dex more or less moves a turnoff age by several per cent.`,
    'The age interval carries star-to-star scatter, distance, reddening and their errors. It does not carry the error of the stellar models themselves (about 5 % in luminosity and radius as fitted, and the choice of overshooting behind them) nor of the colour-temperature scale.',
    'The distance interval does not include a zero-point error of the parallaxes unless one was given.',
    // What the age says of models and metallicity stands above in other words.
    ...(age.notes ?? []).filter((note) => !note.startsWith('Intervals do not include')),
  ];
  const cells = rows.map(([label, m]) => [label, String(m)]);
  const summary: ClusterSummary = {
    name,
    members: members.expectedCount,
    distance: distance.distance,
    modulus: distance.modulus,
    reddening,
    turnoffMass: age.turnoffMass,
    age: age.age,
    metallicity,
    caveats: Object.freeze(caveats),
    line,
  };
  return presentable(summary, {
    text: () =>
      [
        line,
        '',
        name,
        textTable(['quantity', 'value with 68 % interval'], cells),
        '',
        ...caveats.map((c) => `- ${c}`),
      ].join('\n'),
    html: () =>
      `<div>${htmlTable(['quantity', 'value with 68 % interval'], cells, { caption: name })}` +
      `<p>Before you quote these:</p><ul>${caveats.map((c) => `<li>${escapeHtml(c)}</li>`).join('')}</ul></div>`,
  });
}
