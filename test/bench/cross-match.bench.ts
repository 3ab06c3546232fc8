import { execFileSync, spawnSync } from 'node:child_process';
import { existsSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { Catalogue } from '../../kernel-lib/catalogue/catalogue';
import { crossMatch } from '../../kernel-lib/catalogue/cross-match';
import { randomStream } from '../../kernel-lib/quantity/random';

/** Nearest match of 1e6 x 1e6 rows, against scipy's cKDTree on unit vectors and astropy in the same run. */
const ROWS = 1_000_000;
const RADIUS = 2;
const TRIES = 2;

const PEER = `
import json, resource, sys, time, numpy as np
name, path = sys.argv[1], sys.argv[2]
v = np.fromfile(path).reshape(4, -1)
limit = ${RADIUS}
if name == 'cKDTree':
    import scipy
    from scipy.spatial import cKDTree
    version = scipy.__version__
    def unit(ra, dec):
        a, d = np.radians(ra), np.radians(dec)
        return np.column_stack([np.cos(d)*np.cos(a), np.cos(d)*np.sin(a), np.sin(d)])
    def match():
        a, b = unit(v[0], v[1]), unit(v[2], v[3])
        chord = 2*np.sin(np.radians(limit/3600)/2)
        d, j = cKDTree(b).query(a, distance_upper_bound=chord)
        ok = np.isfinite(d)
        return ok.sum(), (2*np.arcsin(d[ok]/2)).sum()*648000/np.pi
else:
    import astropy
    import astropy.units as u
    from astropy.coordinates import SkyCoord, match_coordinates_sky
    version = astropy.__version__
    def match():
        a, b = SkyCoord(v[0]*u.deg, v[1]*u.deg), SkyCoord(v[2]*u.deg, v[3]*u.deg)
        j, s, _ = match_coordinates_sky(a, b)
        s = s.arcsec
        ok = s <= limit
        return ok.sum(), s[ok].sum()
best = 1e9
for _ in range(${TRIES}):
    start = time.perf_counter()
    count, total = match()
    best = min(best, time.perf_counter() - start)
print(json.dumps({'seconds': best, 'count': int(count), 'total': float(total), 'version': version,
    'peakMB': resource.getrusage(resource.RUSAGE_SELF).ru_maxrss / 1024}))
`;

interface Result {
  readonly seconds: number;
  readonly count: number;
  readonly total: number;
  readonly version: string;
  readonly peakMB: number;
}

if (process.argv[2] === 'own') console.log(JSON.stringify(matchOurs(process.argv[3])));
else compare();

function matchOurs(path: string): Result {
  const bytes = readFileSync(path);
  const all = new Float64Array(bytes.buffer, bytes.byteOffset, bytes.length / 8);
  const side = (k: number) =>
    new Catalogue({
      source: 'bench',
      rowCount: ROWS,
      columns: ['ra', 'dec'].map((name, c) => ({ name, values: all.slice((k + c) * ROWS, (k + c + 1) * ROWS) })),
      roles: { rightAscension: 'ra', declination: 'dec' },
    });
  const [left, right] = [side(0), side(2)];
  let seconds = Number.POSITIVE_INFINITY;
  let count = 0;
  let total = 0;
  for (let t = 0; t < TRIES; t++) {
    const start = performance.now();
    const found = crossMatch(left, right, { radiusArcsec: RADIUS });
    seconds = Math.min(seconds, (performance.now() - start) / 1000);
    count = found.rowCount;
    total = found.numbers('separation_arcsec').reduce((a, b) => a + b, 0);
  }
  return { seconds, count, total, version: process.version, peakMB: process.resourceUsage().maxRSS / 1024 };
}

function compare(): void {
  const near = ['.venv/bin/python', '../.venv/bin/python', '../../.venv/bin/python'];
  const python = process.env.COEVAL_PYTHON ?? near.find((p) => existsSync(p));
  if (!python) throw new Error('No Python with scipy and astropy: npm test makes .venv; else set COEVAL_PYTHON.');
  const folder = mkdtempSync(join(tmpdir(), 'coeval-bench-'));
  try {
    for (const [name, wide] of [
      ['whole sky', true],
      ['field of 5 x 5 deg', false],
    ] as const) {
      const path = join(folder, 'places.bin');
      writeFileSync(path, new Uint8Array(places(wide).buffer));
      console.log(`${name}: ${ROWS} x ${ROWS} rows, nearest within ${RADIUS} arcsec, best of ${TRIES}`);
      const own = spawnSync(process.execPath, [process.argv[1], 'own', path], { encoding: 'utf8' });
      if (own.status !== 0) throw new Error(own.stderr);
      const ours = JSON.parse(own.stdout) as Result;
      console.log(line('coeval, with probabilities', ours));
      for (const peerName of ['cKDTree', 'astropy']) {
        const peer = JSON.parse(execFileSync(python, ['-c', PEER, peerName, path], { encoding: 'utf8' })) as Result;
        if (peer.count !== ours.count || Math.abs(peer.total / ours.total - 1) > 1e-8) {
          throw new Error(
            `${peerName} matched otherwise: ${peer.count}, sum ${peer.total}; ours ${ours.count}, ${ours.total}`,
          );
        }
        console.log(
          `${line(peerName, peer)}; coeval is ${(peer.seconds / ours.seconds).toFixed(2)} times as fast, with ${(ours.peakMB / peer.peakMB).toFixed(2)} times the memory`,
        );
      }
    }
  } finally {
    rmSync(folder, { recursive: true });
  }
}

function line(name: string, { seconds, count, version, peakMB }: Result): string {
  return `${name} (${version}): ${seconds.toFixed(2)} s, ${count} matched, peak memory ${peakMB.toFixed(0)} MB`;
}

/** ra, dec of the left, then of the right: the left measured again to 0.5 arcsec, in the same order. */
function places(wide: boolean): Float64Array<ArrayBuffer> {
  const s = randomStream(2);
  const out = new Float64Array(4 * ROWS);
  for (let i = 0; i < ROWS; i++) {
    const ra = wide ? 360 * s.uniform() : 130 + 5 * s.uniform();
    const dec = wide ? (Math.asin(2 * s.uniform() - 1) * 180) / Math.PI : 19 + 5 * s.uniform();
    out[i] = ra;
    out[ROWS + i] = dec;
    out[2 * ROWS + i] = ra + (0.5 * s.normal()) / 3600;
    out[3 * ROWS + i] = Math.max(-90, Math.min(90, dec + (0.5 * s.normal()) / 3600));
  }
  return out;
}
