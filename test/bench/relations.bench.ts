import { execFileSync } from 'node:child_process';
import { randomStream } from '../../kernel-lib/quantity/random';
import { fitMassLuminosity } from '../../kernel-lib/relations/mass-luminosity';

/**
 * Bootstrap of an errors-in-both-axes fit to 1,000 stars: 10,000 resamples by fitMassLuminosity (with its scatter, comparison of
 * selections, outliers and leverage) against scipy.odr in the same run, on resamples of the same stars from the same start.
 */
const STARS = 1000;
const RESAMPLES = 10_000;

const PEER = `
import json, sys, time, warnings
warnings.simplefilter('ignore')
import numpy as np, scipy
from scipy import odr
d = json.load(sys.stdin)
x, y, sx, sy = (np.array(d[k]) for k in ('logMass', 'logLuminosity', 'logMassError', 'logLuminosityError'))
rng = np.random.default_rng(1)
model = odr.unilinear
start = time.perf_counter()
slopes = np.empty(${RESAMPLES})
for k in range(${RESAMPLES}):
    i = rng.integers(0, len(x), len(x))
    slopes[k] = odr.ODR(odr.RealData(x[i], y[i], sx=sx[i], sy=sy[i]), model, beta0=[4.0, 0.0]).run().beta[0]
print(json.dumps({'seconds': time.perf_counter() - start, 'slope': float(np.median(slopes)), 'error': float(np.std(slopes)), 'version': scipy.__version__}))
`;

const s = randomStream(7);
const list = (f: (i: number) => number) => Array.from({ length: STARS }, (_, i) => f(i));
const truth = list(() => -0.5 + 1.5 * s.uniform());
const logMassError = list(() => 0.005 + 0.02 * s.uniform());
const logLuminosityError = list(() => 0.02 + 0.06 * s.uniform());
const stars = {
  logMass: list((i) => truth[i] + logMassError[i] * s.normal()),
  logMassError,
  logLuminosity: list((i) => 4 * truth[i] + logLuminosityError[i] * s.normal()),
  logLuminosityError,
};

const python = process.env.COEVAL_PYTHON;
if (!python) throw new Error('Set COEVAL_PYTHON to a Python with scipy, or run all benchmarks by npm run bench.');
const times: number[] = [];
let found = fitMassLuminosity(stars, { method: 'errors-in-both-axes', resamples: 200 });
for (let round = 0; round < 3; round++) {
  const start = performance.now();
  found = fitMassLuminosity(stars, { method: 'errors-in-both-axes', resamples: RESAMPLES });
  times.push((performance.now() - start) / 1000);
}
const seconds = times.sort((a, b) => a - b)[1];
const peer = JSON.parse(execFileSync(python, ['-c', PEER], { input: JSON.stringify(stars), encoding: 'utf8' })) as {
  seconds: number;
  slope: number;
  error: number;
  version: string;
};
const exponent = found.exponents[0];
console.log(`${RESAMPLES} resamples of an errors-in-both-axes fit to ${STARS} stars`);
console.log(`fitMassLuminosity    ${seconds.toFixed(2)} s (median of 3), exponent ${exponent}`);
console.log(
  `scipy.odr ${peer.version}     ${peer.seconds.toFixed(1)} s, slope ${peer.slope.toFixed(4)} ± ${peer.error.toFixed(4)}`,
);
console.log(`ratio ${(peer.seconds / seconds).toFixed(0)}`);
const apart = Math.abs(exponent.value - peer.slope) / peer.error;
// Two bootstraps of 10,000 agree in the median within a few hundredths of the error.
if (!(apart < 0.1)) throw new Error(`The two disagree by ${apart.toFixed(2)} standard errors.`);
