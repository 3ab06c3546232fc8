import { spawnSync } from 'node:child_process';
import { existsSync, mkdirSync, readFileSync, rmSync } from 'node:fs';
import { performance } from 'node:perf_hooks';
import { build } from '../kernel-lib/commands/build.mjs';
import { jupyterEnvironment, venvPython } from '../kernel-lib/commands/environment.mjs';
import { inRoot, root } from '../kernel-lib/commands/paths.mjs';
import { Problem } from '../kernel-lib/commands/problem.mjs';
import { createProgress, duration } from '../kernel-lib/commands/progress.mjs';
import { setUp } from '../kernel-lib/commands/set-up.mjs';
import { needChromium } from './chromium.mjs';
import { kernelTypeErrors } from './kernel-types.mjs';
import { countsOf } from './vitest-counts.mjs';

const started = performance.now();
const elapsed = () => duration((performance.now() - started) / 1000);
const counts = { passed: 0, failed: 0, skipped: 0 };

function add(more) {
  for (const key of Object.keys(counts)) counts[key] += more[key];
}

/** Counts one check that is not a vitest test. */
async function check(title, work) {
  console.log(`\n== ${title} (${elapsed()})`);
  try {
    await work();
    add({ passed: 1, failed: 0, skipped: 0 });
  } catch (error) {
    console.error(`${title} FAILED: ${error.message}`);
    add({ passed: 0, failed: 1, skipped: 0 });
  }
}

function run(program, parameters, env = process.env) {
  const { status, error } = spawnSync(program, parameters, { cwd: root, stdio: 'inherit', env });
  if (error) throw error;
  return status ?? 1;
}

function mustSucceed(parameters) {
  const status = run(process.execPath, parameters);
  if (status !== 0) throw new Error(`ended with status ${status}`);
}

const bin = (...parts) => inRoot('node_modules', ...parts);
const compiler = bin('typescript', 'bin', 'tsc');

async function checks() {
  await check('build', () => build({ say: (line) => console.log(line) }));
  await check('format and lint', () => mustSucceed([bin('@biomejs', 'biome', 'bin', 'biome'), 'check', '.']));
  await check('types of the library and its tests', () => mustSucceed([compiler, '-p', 'test/tsconfig.json']));
  await check('declarations as the kernel reads them', () => {
    const errors = kernelTypeErrors();
    if (errors.length > 0) throw new Error(`\n${errors.join('\n')}`);
  });
}

function vitest(env, filters) {
  console.log(`\n== vitest (${elapsed()})`);
  const output = inRoot('test', '.output');
  mkdirSync(output, { recursive: true });
  const report = inRoot('test', '.output', 'vitest.json');
  rmSync(report, { force: true });
  const reporters = ['--reporter=default', '--reporter=json', `--outputFile.json=${report}`];
  const parameters = [
    bin('vitest', 'vitest.mjs'),
    'run',
    '--config',
    'test/vitest.config.ts',
    ...reporters,
    ...filters,
  ];
  const status = run(process.execPath, parameters, env);
  add(countsOf(existsSync(report) ? JSON.parse(readFileSync(report, 'utf8')) : null, status));
}

async function main() {
  // Words after `npm test --` choose test files, as vitest takes them; the checks are then left out.
  const filters = process.argv.slice(2);
  const progress = createProgress();
  await setUp({ tests: true, build: false, progress });
  const chromium = await needChromium(progress);
  if (filters.length === 0) await checks();
  else await build({ say: (line) => console.log(line) });
  const env = { ...jupyterEnvironment(), COEVAL_PYTHON: venvPython, CHROME_PATH: chromium };
  if (!process.stdout.isTTY) env.NO_COLOR = '1';
  vitest(env, filters);
}

try {
  await main();
} catch (error) {
  console.error(`npm test: ${error instanceof Problem ? error.message : error.stack}`);
  counts.failed += 1;
}
const skipped = counts.skipped > 0 ? `, ${counts.skipped} skipped` : '';
console.log(`\nEnded after ${elapsed()}.`);
console.log(`${counts.passed} passed, ${counts.failed} failed${skipped}`);
process.exitCode = counts.failed > 0 || counts.passed === 0 ? 1 : 0;
