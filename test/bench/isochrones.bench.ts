/** Isochrones a second (400 points, 3 bands) against the same formulas in vectorised numpy, in the same run. */
import { spawnSync } from 'node:child_process';
import { existsSync } from 'node:fs';
import { join } from 'node:path';
import { fitsAt } from '../../kernel-lib/models/fits';
import { isochrone } from '../../kernel-lib/models/isochrone';
import { Life } from '../../kernel-lib/models/life';
import { SOLAR_Z } from '../../kernel-lib/models/metallicity';
import { StarState } from '../../kernel-lib/models/phases/phase';
import { absoluteMagnitudes } from '../../kernel-lib/photometry/absolute-magnitudes';
import type { Band } from '../../kernel-lib/quantity/band';

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
  const logTeff = Array.from({ length: 200 }, (_, i) => 3.4 + (1.3 * i) / 199);
  const light = absoluteMagnitudes({
    logL: new Float64Array(200),
    logTeff: Float64Array.from(logTeff),
    logGravity: new Float64Array(200).fill(4.4),
    metallicity: 0,
    bands: BANDS,
  });
  const input = {
    ...fits,
    a: Array.from(fits.a),
    b: Array.from(fits.b),
    zeroAgeLuminosity: Array.from(fits.zeroAgeLuminosity),
    zeroAgeRadius: Array.from(fits.zeroAgeRadius),
    logTeff,
    light: BANDS.map((b) => Array.from(light[b] as Float64Array, (m) => m - 4.74)),
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
  const answer = JSON.parse(run.stdout) as { rate: number; check: [number, number][] };
  let worst = 0;
  answer.check.forEach((pair, i) => {
    for (let j = 0; j < 2; j++) worst = Math.max(worst, Math.abs(pair[j] / expected[i][j] - 1));
  });
  return { rate: answer.rate, worst };
}

const own = ours();
const numpy = peer();
if (!(numpy.worst < 1e-9)) throw new Error(`isochrones.bench: the two sides differ by ${numpy.worst}; no comparison.`);
console.log(
  `isochrones (400 points, 3 bands; numpy): ours ${own.toFixed(0)}/s, peer ${numpy.rate.toFixed(0)}/s, ratio ${(own / numpy.rate).toFixed(1)}`,
);
