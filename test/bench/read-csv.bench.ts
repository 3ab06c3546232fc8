import { execFileSync, spawnSync } from 'node:child_process';
import { closeSync, existsSync, mkdtempSync, openSync, rmSync, statSync, writeSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { readCatalogue } from '../../kernel-lib/catalogue/read/read-catalogue';
import { randomStream } from '../../kernel-lib/quantity/random';

/** Reading a CSV file of 1e6 rows and 12 columns, against pandas.read_csv and astropy's fast reader in the same run. */
const ROWS = 1_000_000;
const TRIES = 3;
const NAMES =
  'source_id,ra,dec,parallax,parallax_error,pmra,pmra_error,pmdec,pmdec_error,phot_g_mean_mag,phot_bp_mean_mag,phot_rp_mean_mag';

const PEER = `
import json, resource, sys, time
name, path = sys.argv[1], sys.argv[2]
if name == 'pandas':
    import pandas
    read = pandas.read_csv
    version = pandas.__version__
else:
    import astropy
    from astropy.table import Table
    read = lambda p: Table.read(p, format='ascii.fast_csv')
    version = astropy.__version__
best = 1e9
for _ in range(${TRIES}):
    start = time.perf_counter()
    table = read(path)
    best = min(best, time.perf_counter() - start)
    rows = len(table)
    total = float(table['ra'].sum())
    del table
print(json.dumps({'seconds': best, 'rows': rows, 'total': total, 'version': version,
    'peakMB': resource.getrusage(resource.RUSAGE_SELF).ru_maxrss / 1024}))
`;

interface Result {
  readonly seconds: number;
  readonly rows: number;
  readonly total: number;
  readonly version: string;
  readonly peakMB: number;
}

if (process.argv[2] === 'own') console.log(JSON.stringify(await readOurs(process.argv[3])));
else await compare();

async function readOurs(path: string): Promise<Result> {
  let seconds = Number.POSITIVE_INFINITY;
  let rows = 0;
  let total = 0;
  for (let k = 0; k < TRIES; k++) {
    const start = performance.now();
    const catalogue = await readCatalogue(path);
    seconds = Math.min(seconds, (performance.now() - start) / 1000);
    rows = catalogue.rowCount;
    total = catalogue.numbers('rightAscension').reduce((a, b) => a + b, 0);
  }
  return { seconds, rows, total, version: process.version, peakMB: process.resourceUsage().maxRSS / 1024 };
}

async function compare(): Promise<void> {
  const folder = mkdtempSync(join(tmpdir(), 'coeval-bench-'));
  try {
    const path = join(folder, 'field.csv');
    writeField(path);
    const python = pythonPath();
    console.log(
      `reading CSV: ${ROWS} rows, 12 columns, ${(statSync(path).size / 1e6).toFixed(0)} MB, best of ${TRIES}`,
    );
    // Each in a process of its own, so that its peak memory is its own.
    const ours = JSON.parse(
      spawnSync(process.execPath, [process.argv[1], 'own', path], { encoding: 'utf8' }).stdout,
    ) as Result;
    console.log(line('coeval', ours));
    for (const name of ['pandas', 'astropy']) {
      const peer = JSON.parse(execFileSync(python, ['-c', PEER, name, path], { encoding: 'utf8' })) as Result;
      if (peer.rows !== ours.rows || Math.abs(peer.total / ours.total - 1) > 1e-12) {
        throw new Error(
          `${name} read something else: ${peer.rows} rows, sum ${peer.total}, ours ${ours.rows}, ${ours.total}`,
        );
      }
      console.log(`${line(name, peer)}, coeval is ${(peer.seconds / ours.seconds).toFixed(2)} times as fast`);
    }
  } finally {
    rmSync(folder, { recursive: true });
  }
}

function line(name: string, { seconds, rows, version, peakMB }: Result): string {
  return `${name} (${version}): ${(rows / seconds / 1e6).toFixed(2)} million rows/s (${seconds.toFixed(3)} s), peak memory ${peakMB.toFixed(0)} MB`;
}

function pythonPath(): string {
  const near = ['.venv/bin/python', '../.venv/bin/python', '../../.venv/bin/python'];
  const found = process.env.COEVAL_PYTHON ?? near.find((p) => existsSync(p));
  if (!found) throw new Error('No Python with pandas and astropy: npm test makes .venv; else set COEVAL_PYTHON.');
  return found;
}

/** A field as surveys publish it: 10 to 13 decimals in positions, 1 in 50 stars without a BP magnitude. */
function writeField(path: string): void {
  const s = randomStream(1);
  const file = openSync(path, 'w');
  let text = `${NAMES}\n`;
  for (let i = 0; i < ROWS; i++) {
    const g = 20 - 8 * s.uniform() ** 2;
    const error = 0.02 + 0.3 * s.uniform();
    const bp = s.uniform() < 0.02 ? '' : (g + 0.5 + s.uniform()).toFixed(6);
    text +=
      `${4_000_000_000 + 7 * i},${(130 + s.uniform()).toFixed(12)},${(19 + s.uniform()).toFixed(12)},${s.normal().toFixed(8)},` +
      `${error.toFixed(6)},${(5 * s.normal()).toFixed(8)},${error.toFixed(6)},${(5 * s.normal()).toFixed(8)},${error.toFixed(6)},` +
      `${g.toFixed(6)},${bp},${(g - 0.5).toFixed(6)}\n`;
    if (text.length > 1 << 20) {
      writeSync(file, text);
      text = '';
    }
  }
  writeSync(file, text);
  closeSync(file);
}
