import { execFileSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { Catalogue } from '../../kernel-lib/catalogue/catalogue';
import { readAstrometry } from '../../kernel-lib/membership/astrometry';
import { firstField, splitField, withClusterShare } from '../../kernel-lib/membership/field-stars';
import { findMembers } from '../../kernel-lib/membership/find-members';
import { meanMotion } from '../../kernel-lib/membership/mean-motion';
import { fitMixture } from '../../kernel-lib/membership/mixture';
import { randomStream } from '../../kernel-lib/quantity/random';

/**
 * Membership of 1e6 stars in motion and parallax against scikit-learn's GaussianMixture in the same run: the same three
 * Gaussians, starts and number of iterations; then each fit as a user calls it. Ours takes every star's own error into account
 * and allows for outliers and for shares that differ with error size; the peer does not.
 */
const STARS = 1_000_000;
const ITERATIONS = 20;

const PEER = `
import json, resource, sys, time, warnings
import numpy as np, sklearn
from sklearn.mixture import GaussianMixture
warnings.filterwarnings('ignore')
path, task = sys.argv[1], sys.argv[2]
x = np.fromfile(path).reshape(-1, 6)[:, :3].copy()
start = time.perf_counter()
if task == 'same':
    m = GaussianMixture(3, covariance_type='full', tol=0, max_iter=${ITERATIONS}, weights_init=[.55, .4, .05],
        means_init=[[0, 0, 0.5], [0, 0, 1.0], [-4, 3, 1.25]],
        precisions_init=[np.diag([1/9, 1/9, 4.0]), np.diag([1/64, 1/64, 1.0]), np.diag([4.0, 4.0, 25.0])], init_params='random_from_data')
else:
    m = GaussianMixture(3, covariance_type='full', random_state=1, max_iter=500)
m.fit(x)
p = m.predict_proba(x)
k = int(np.argmin([np.linalg.det(c) for c in m.covariances_]))
print(json.dumps({'seconds': time.perf_counter() - start, 'iterations': int(m.n_iter_), 'members': float(p[:, k].sum()),
    'peakMB': resource.getrusage(resource.RUSAGE_SELF).ru_maxrss / 1024, 'version': sklearn.__version__}))
`;

interface Result {
  readonly seconds: number;
  readonly iterations: number;
  readonly members: number;
  readonly peakMB: number;
  readonly version: string;
}

if (process.argv[2] === 'own') console.log(JSON.stringify(ours(process.argv[3], process.argv[4] as Task)));
else compare();

type Task = 'same' | 'whole';

function ours(path: string, task: Task): Result {
  const catalogue = readField(path);
  const start = performance.now();
  let iterations: number;
  let members = 0;
  if (task === 'same') {
    const { stars } = readAstrometry('membership benchmark', catalogue, { useParallax: true, positions: false });
    const limits = { leastMotion: 1e-4, mostMotion: 2, leastParallax: 1e-5, mostParallax: 1 };
    const cluster = meanMotion(Float64Array.of(-4, 3, 1.25, 0.25, 0, 0.25, 0.04), limits, true);
    const field = withClusterShare(stars, splitField(stars, firstField(stars), 0, 'width'), 0.05);
    const fit = fitMixture(stars, { cluster, field }, ITERATIONS, -1);
    iterations = fit.iterations;
    members = fit.probability.reduce((a, b) => a + b, 0);
  } else {
    const found = findMembers(catalogue, { fieldComponents: 2 });
    iterations = found.iterations;
    members = found.expectedCount.value;
  }
  const seconds = (performance.now() - start) / 1000;
  return { seconds, iterations, members, peakMB: process.resourceUsage().maxRSS / 1024, version: process.version };
}

function compare(): void {
  const python = process.env.COEVAL_PYTHON;
  if (!python)
    throw new Error('Set COEVAL_PYTHON to a Python with scikit-learn, or run all benchmarks by npm run bench.');
  const folder = mkdtempSync(join(tmpdir(), 'coeval-bench-'));
  try {
    const path = join(folder, 'field.bin');
    writeField(path);
    for (const task of ['same', 'whole'] as const) {
      console.log(
        task === 'same'
          ? `membership: ${STARS} stars, 3 Gaussians in 3 dimensions, ${ITERATIONS} iterations from the same start`
          : `membership: ${STARS} stars, the whole fit with 3 Gaussians and its own search for a start`,
      );
      // Each in a process of its own, so that its peak memory is its own.
      const own = JSON.parse(
        execFileSync(process.execPath, [process.argv[1], 'own', path, task], { encoding: 'utf8' }),
      ) as Result;
      const peer = JSON.parse(execFileSync(python, ['-c', PEER, path, task], { encoding: 'utf8' })) as Result;
      console.log(line('coeval', own));
      console.log(`${line('scikit-learn', peer)}, coeval is ${(peer.seconds / own.seconds).toFixed(2)} times as fast`);
    }
  } finally {
    rmSync(folder, { recursive: true });
  }
}

function line(name: string, r: Result): string {
  return (
    `${name} (${r.version}): ${(STARS / r.seconds / 1e6).toFixed(3)} million stars/s (${r.seconds.toFixed(2)} s, ` +
    `${r.iterations} iterations), ${r.members.toFixed(0)} members, peak memory ${r.peakMB.toFixed(0)} MB`
  );
}

/** Motion, parallax and their errors, six numbers a star; 3 % of the stars are the cluster. */
function writeField(path: string): void {
  const s = randomStream(1);
  const data = new Float64Array(6 * STARS);
  for (let i = 0; i < STARS; i++) {
    const kind = i % 100 < 3 ? 2 : s.uniform() < 0.6 ? 0 : 1;
    const motion = [3, 8, 0.2][kind];
    const depth = [0.25, 0.4, 0.01][kind];
    const error = 0.03 + 0.3 * s.uniform() ** 3;
    const mean = [
      [-1, -2, 0.5],
      [-3, -4, 1.1],
      [-4, 3, 1.25],
    ][kind];
    for (let d = 0; d < 3; d++) {
      data[6 * i + d] = mean[d] + (d < 2 ? motion : depth) * s.normal() + error * s.normal();
      data[6 * i + 3 + d] = error;
    }
  }
  writeFileSync(path, data);
}

function readField(path: string): Catalogue {
  const data = new Float64Array(new Uint8Array(readFileSync(path)).buffer);
  const names = ['pmra', 'pmdec', 'parallax', 'pmra_error', 'pmdec_error', 'parallax_error'];
  return new Catalogue({
    source: 'benchmark field',
    rowCount: data.length / 6,
    columns: names.map((name, d) => ({
      name,
      values: Float64Array.from({ length: data.length / 6 }, (_, i) => data[6 * i + d]),
    })),
    roles: {
      properMotionRa: 'pmra',
      properMotionDec: 'pmdec',
      parallax: 'parallax',
      'properMotionRa.error': 'pmra_error',
      'properMotionDec.error': 'pmdec_error',
      'parallax.error': 'parallax_error',
    },
  });
}
