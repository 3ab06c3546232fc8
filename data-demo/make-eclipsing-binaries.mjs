// Writes the invented eclipsing binaries of this folder: `node data-demo/make-eclipsing-binaries.mjs [folder]`.
// Forty systems of two stars of one age, from the library's stellar models, seen with errors such as light and velocity curves give.
// The same sources give the same bytes: numbers are printed with fewer digits than machines may differ in.
import { writeFileSync } from 'node:fs';
import { dirname, join, resolve } from 'node:path';
import { fileURLToPath } from 'node:url';
import { build } from 'esbuild';

const here = dirname(fileURLToPath(import.meta.url));
const root = dirname(here);

/** What is true of the table; nothing of it is real. */
export const truth = {
  systems: 40,
  /** Systems whose primary has left the main sequence. */
  evolved: 7,
  masses: [0.28, 18],
  metallicities: [-0.25, 0.15],
  seed: 73,
};

const file = 'eclipsing-binaries.csv';
const NAMES =
  'Aldrun Bessia Corvane Dalmeth Estora Fennick Galvoy Hestrel Irvane Jassil Keldor Lumara Mirrow Norvess Ostrin Pellane Quarrow Rustane Selvik Tarrow Ulmeth Vessary Wendle Xarrin Yovell Zembra Ashlor Brannet Cindral Dorvest Ellaro Farrend Grethe Hollune Istrane Jorvell Kestane Lorrimet Marrash Nethune'.split(
    ' ',
  );

/** Bundles what is needed of the library from its sources, so that no build has to come first. */
async function loadLibrary() {
  const contents = `
    export { evolve } from './models/evolve';
    export { mainSequenceLifetime } from './models/lifetime';
    export { Catalogue } from './catalogue/catalogue';
    export { writeCsv } from './catalogue/write/csv';
    export { randomStream } from './quantity/random';`;
  const { outputFiles } = await build({
    stdin: { contents, resolveDir: join(root, 'kernel-lib'), loader: 'ts' },
    bundle: true,
    write: false,
    platform: 'node',
    format: 'esm',
    target: 'node20',
    logLevel: 'warning',
  });
  return import(`data:text/javascript;base64,${Buffer.from(outputFiles[0].contents).toString('base64')}`);
}

/**
 * The file as bytes.
 * @returns {Promise<Record<string, Uint8Array>>} by name
 */
export async function makeFiles() {
  const { evolve, mainSequenceLifetime, Catalogue, writeCsv, randomStream } = await loadLibrary();
  const stream = randomStream(truth.seed);
  const rows = [];
  const solarAge = 12;
  for (let k = 0; k < truth.systems; k++) {
    const random = stream.fork(k);
    const between = ([low, high]) => low + (high - low) * random.uniform();
    const metallicity = between(truth.metallicities);
    const evolved = k % 6 === 3 && k / 6 < truth.evolved;
    // Masses spread evenly in their logarithm; stars that evolve in time lie between 1 and 8.
    const step = (k + random.uniform()) / truth.systems;
    const [low, high] = truth.masses.map(Math.log);
    const primary = evolved ? 1.1 + 5 * random.uniform() ** 2 : Math.exp(low + step * (high - low));
    const secondary = Math.max(0.15, primary * (0.55 + 0.43 * random.uniform()));
    const life = mainSequenceLifetime({ mass: primary, metallicity });
    const age = evolved
      ? agePast(evolve, primary, metallicity, life, random)
      : Math.min(solarAge, life * (0.1 + 0.8 * random.uniform()));
    const orbit = Math.exp(Math.log(1.5) + Math.log(evolved ? 80 : 12) * random.uniform()) * (evolved ? 20 : 1);
    for (const [component, mass] of [
      ['A', primary],
      ['B', secondary],
    ]) {
      const star = evolve({ mass, age, metallicity });
      const massShare = 0.006 + 0.012 * random.uniform();
      const radiusShare = 0.006 + 0.012 * random.uniform();
      const heatShare = 0.012 + 0.018 * random.uniform();
      const seenMass = mass * (1 + massShare * random.normal());
      const seenRadius = star.radius * (1 + radiusShare * random.normal());
      const seenHeat = star.temperature * (1 + heatShare * random.normal());
      const luminosity = seenRadius ** 2 * (seenHeat / 5772) ** 4;
      rows.push({
        name: `${NAMES[k]} ${component}`,
        period: orbit,
        metallicity,
        mass: seenMass,
        mass_error: seenMass * massShare,
        radius: seenRadius,
        radius_error: seenRadius * radiusShare,
        temperature: seenHeat,
        temperature_error: seenHeat * heatShare,
        luminosity,
        luminosity_error: luminosity * Math.hypot(2 * radiusShare, 4 * heatShare),
      });
    }
  }
  const digits = (key, n) => Float64Array.from(rows, (r) => Number(r[key].toPrecision(n)));
  const column = (name, unit, description, n) => ({ name, unit, description, values: digits(name, n) });
  const table = new Catalogue({
    source: file,
    rowCount: rows.length,
    columns: [
      { name: 'name', values: rows.map((r) => r.name), description: 'invented system and component' },
      column('period', 'd', 'orbital period', 5),
      column('metallicity', 'dex', '[Fe/H] of the system', 2),
      column('mass', 'Msun', 'mass', 5),
      column('mass_error', 'Msun', 'standard error of the mass', 2),
      column('radius', 'Rsun', 'radius', 5),
      column('radius_error', 'Rsun', 'standard error of the radius', 2),
      column('temperature', 'K', 'effective temperature', 4),
      column('temperature_error', 'K', 'standard error of the temperature', 2),
      column('luminosity', 'Lsun', 'luminosity from radius and temperature', 4),
      column('luminosity_error', 'Lsun', 'standard error of the luminosity', 2),
    ],
  });
  return { [file]: Buffer.concat([...writeCsv(table)]) };
}

/** An age at which the primary has left the main sequence and still shines as a subgiant or giant. */
function agePast(evolve, mass, metallicity, life, random) {
  for (let tries = 0; tries < 200; tries++) {
    const age = life * (1.001 + 0.25 * random.uniform());
    const { phase } = evolve({ mass, age, metallicity });
    if (['Hertzsprung gap', 'first giant branch', 'core helium burning'].includes(phase)) return age;
  }
  return life * 1.002;
}

if (process.argv[1] && resolve(process.argv[1]) === fileURLToPath(import.meta.url)) {
  const folder = process.argv[2] ?? here;
  for (const [name, bytes] of Object.entries(await makeFiles())) {
    writeFileSync(join(folder, name), bytes);
    console.log(`${join(folder, name)}: ${bytes.length} bytes`);
  }
}
