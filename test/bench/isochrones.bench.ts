/** Isochrones a second (400 points, 3 bands) against the same formulas in vectorised numpy, in the same run. */
import { spawnSync } from 'node:child_process';
import { existsSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { chromium } from 'playwright-core';
import { fitsAt } from '../../kernel-lib/models/fits';
import { isochrone } from '../../kernel-lib/models/isochrone';
import { Life } from '../../kernel-lib/models/life';
import { SOLAR_Z } from '../../kernel-lib/models/metallicity';
import { StarState } from '../../kernel-lib/models/phases/phase';
import { absoluteMagnitudes } from '../../kernel-lib/photometry/absolute-magnitudes';
import { compositeLight } from '../../kernel-lib/photometry/composite/composite-light';
import { GRID_START, GRID_STEP } from '../../kernel-lib/photometry/light-table';
import type { Band } from '../../kernel-lib/quantity/band';
import { findChromium } from '../chromium.mjs';

const SECONDS = 2;
const BANDS: readonly Band[] = ['G', 'BP', 'RP'];
const logAges = Array.from({ length: 61 }, (_, i) => 7 + i * 0.05);

function ours(): number {
  const once = () => {
    for (const logAge of logAges) isochrone({ logAge, bands: BANDS });
  };
  once();
  const start = performance.now();
  let done = 0;
  while (performance.now() - start < SECONDS * 1000) {
    once();
    done += logAges.length;
  }
  return (1000 * done) / (performance.now() - start);
}

/** Masses and times over all phases, to make sure that both sides work out the same stars. */
function checkPoints(): { at: [number, number][]; expected: [number, number][] } {
  const life = new Life(fitsAt(SOLAR_Z));
  const state = new StarState();
  const at: [number, number][] = [];
  const expected: [number, number][] = [];
  for (const mass of [0.3, 0.9, 1.2, 1.6, 2.2, 3, 5, 8, 14, 25, 40]) {
    life.setMass(mass);
    let before = 0;
    for (let k = 2; k < life.momentCount; k++) {
      const time = 0.5 * (before + life.moment(k));
      if (life.moment(k) > before * (1 + 1e-9)) {
        life.stateIn(life.phaseAt(time), time, state);
        at.push([mass, time]);
        expected.push([state.luminosity, state.radius]);
      }
      before = life.moment(k);
    }
  }
  return { at, expected };
}

function peer(): { rate: number; worst: number } {
  const fits = fitsAt(SOLAR_Z);
  const { at, expected } = checkPoints();
  // Dwarfs and giants of all temperatures, to make sure that both sides give the same light.
  const logTeff = Float64Array.from({ length: 200 }, (_, i) => 3.45 + (1.2 * i) / 199);
  const logGravity = logTeff.map((_, i) => [4.5, 3.2, 1.5][i % 3]);
  const logL = logTeff.map((_, i) => (i % 7) - 2);
  const light = absoluteMagnitudes({ logL, logTeff, logGravity, metallicity: 0, bands: BANDS });
  const tables = compositeLight();
  const input = {
    ...fits,
    a: Array.from(fits.a),
    b: Array.from(fits.b),
    zeroAgeLuminosity: Array.from(fits.zeroAgeLuminosity),
    zeroAgeRadius: Array.from(fits.zeroAgeRadius),
    light: BANDS.map((b) => Array.from(tables[b].coefficients)),
    grid: [GRID_START, GRID_STEP],
    lightCheck: [logL, logTeff, logGravity].map((column) => Array.from(column)),
    logAges,
    check: at,
    seconds: SECONDS,
  };
  const root = process.env.COEVAL_ROOT ?? process.cwd();
  const own = join(root, '.venv/bin/python');
  const python = process.env.COEVAL_PYTHON ?? (existsSync(own) ? own : 'python3');
  const script = join(root, 'test/bench/isochrones_peer.py');
  const run = spawnSync(python, [script], { input: JSON.stringify(input), encoding: 'utf8', maxBuffer: 1e8 });
  if (run.status !== 0) throw new Error(`isochrones.bench: ${python} ${script} failed: ${run.stderr || run.error}`);
  const answer = JSON.parse(run.stdout) as { rate: number; check: [number, number][]; light: number[][] };
  let worst = 0;
  answer.check.forEach((pair, i) => {
    for (let j = 0; j < 2; j++) worst = Math.max(worst, Math.abs(pair[j] / expected[i][j] - 1));
  });
  BANDS.forEach((band, b) => {
    answer.light[b].forEach((m, i) => {
      if (!Number.isNaN(light[band][i])) worst = Math.max(worst, Math.abs(m - light[band][i]));
    });
  });
  return { rate: answer.rate, worst };
}

const own = ours();
const times: number[] = [];
for (let k = 0; k < 400; k++) {
  const start = performance.now();
  isochrone({ logAge: 7 + (3 * k) / 400, bands: BANDS });
  times.push(performance.now() - start);
}
const median = times.sort((a, b) => a - b)[200];
const numpy = peer();
if (!(numpy.worst < 1e-9)) throw new Error(`isochrones.bench: the two sides differ by ${numpy.worst}; no comparison.`);
console.log(
  `isochrones (400 points, 3 bands; numpy): ours ${own.toFixed(0)}/s, peer ${numpy.rate.toFixed(0)}/s, ratio ${(own / numpy.rate).toFixed(1)}`,
);
console.log(`one isochrone of 400 points in 3 bands: ${median.toFixed(2)} ms in Node (median of 400 ages)`);

/** The same in a page, by the module for browsers. */
async function inChromium(): Promise<number> {
  const root = process.env.COEVAL_ROOT ?? process.cwd();
  const source = readFileSync(join(root, 'kernel-lib/dist/browser/coeval.mjs'), 'utf8');
  const executablePath = findChromium();
  if (executablePath === null) throw new Error('isochrones.bench: no Chromium found.');
  const browser = await chromium.launch({ executablePath, args: ['--no-sandbox', '--disable-gpu', '--disable-sync'] });
  try {
    const page = await browser.newPage();
    return await page.evaluate(async (text) => {
      const address = URL.createObjectURL(new Blob([text], { type: 'text/javascript' }));
      const coeval = await import(address);
      const spent: number[] = [];
      // A page's clock is coarse, so ten are timed together.
      for (let k = 0; k < 60; k++) {
        const start = performance.now();
        for (let j = 0; j < 10; j++)
          coeval.isochrone({ logAge: 7 + (3 * (10 * k + j)) / 600, bands: ['G', 'BP', 'RP'] });
        spent.push((performance.now() - start) / 10);
      }
      return spent.sort((a, b) => a - b)[30];
    }, source);
  } finally {
    await browser.close();
  }
}

console.log(`one isochrone in Chromium: ${(await inChromium()).toFixed(2)} ms (median of 60 groups of ten ages)`);
