// Writes the invented catalogue of this folder and the truth behind it: `node data-demo/make.mjs [folder]`.
// The same sources give the same bytes: numbers are printed with fewer digits than machines may differ in.
import { writeFileSync } from 'node:fs';
import { dirname, join, resolve } from 'node:path';
import { fileURLToPath } from 'node:url';
import { build } from 'esbuild';

const here = dirname(fileURLToPath(import.meta.url));
const root = dirname(here);

/** The cluster and its field; nothing of it is real. */
export const truth = {
  name: 'Calvessa',
  age: 0.7,
  metallicity: 0,
  distance: 812,
  ebv: 0.11,
  rV: 3.1,
  members: 460,
  fieldStars: 8200,
  binaryFraction: 0.35,
  massRatioSlope: 0,
  initialMassFunction: 'kroupa2001',
  centre: { ra: 104.35, dec: 12.2 },
  fieldRadiusDeg: 0.9,
  radius: 2.4,
  properMotion: { ra: -3.4, dec: -4.1 },
  radialVelocity: 21.6,
  velocityDispersion: 0.6,
  magnitudeLimit: 18,
  whiteDwarfs: true,
  seed: 20,
};

const files = { catalogue: 'calvessa-field.csv', truth: 'calvessa-truth.json' };

/** Decimals printed, by unit: a tenth of the smallest error or less. */
const DECIMALS = { deg: 6, mas: 4, 'mas/yr': 4, mag: 4 };

/** Bundles what is needed of the library from its sources, so that no build has to come first. */
async function loadLibrary() {
  const contents = `
    export { simulateCluster } from './simulate/simulate-cluster';
    export { Catalogue } from './catalogue/catalogue';
    export { writeCsv } from './catalogue/write/csv';`;
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
 * The files as bytes.
 * @returns {Promise<Record<string, Uint8Array>>} by name
 */
export async function makeFiles() {
  const { simulateCluster, Catalogue, writeCsv } = await loadLibrary();
  const full = simulateCluster(truth);
  const columns = full
    .columnData()
    .filter((c) => !c.name.startsWith('true_'))
    .map((c) => ({ ...c, values: c.unit in DECIMALS ? rounded(c.values, DECIMALS[c.unit]) : c.values }));
  const seen = new Catalogue({ source: files.catalogue, rowCount: full.rowCount, columns });
  const modulus = 5 * Math.log10(truth.distance) - 5;
  const members = Array.from(full.numbers('true_member'), (m, i) => (m === 1 ? full.values('star_id')[i] : null));
  const story = {
    about: `What is true of ${files.catalogue}, an invented cluster made by make.mjs. Gyr, dex, pc, mag, deg, mas/yr, km/s.`,
    ...truth,
    distanceModulus: Number(modulus.toFixed(4)),
    parallax: Number((1000 / truth.distance).toFixed(5)),
    memberStars: members.filter((id) => id !== null),
  };
  return {
    [files.catalogue]: Buffer.concat([...writeCsv(seen)]),
    [files.truth]: Buffer.from(`${JSON.stringify(story, null, 1)}\n`),
  };
}

function rounded(values, decimals) {
  return Float64Array.from(values, (v) => Number(v.toFixed(decimals)));
}

if (process.argv[1] && resolve(process.argv[1]) === fileURLToPath(import.meta.url)) {
  const folder = process.argv[2] ?? here;
  for (const [name, bytes] of Object.entries(await makeFiles())) {
    writeFileSync(join(folder, name), bytes);
    console.log(`${join(folder, name)}: ${bytes.length} bytes`);
  }
}
