import { spawnSync } from 'node:child_process';
import { mkdirSync, mkdtempSync, readdirSync, rmSync } from 'node:fs';
import { cpus, totalmem } from 'node:os';
import { basename, join } from 'node:path';
import { jupyterEnvironment, venvPython } from '../../kernel-lib/commands/environment.mjs';
import { inRoot, root } from '../../kernel-lib/commands/paths.mjs';
import { Problem, runCommand } from '../../kernel-lib/commands/problem.mjs';
import { setUp } from '../../kernel-lib/commands/set-up.mjs';

const folder = inRoot('test', 'bench');

const describeMachine = () =>
  `Node ${process.versions.node}, ${cpus().length} x ${cpus()[0]?.model ?? 'unknown processor'}, ${Math.round(totalmem() / 2 ** 30)} GiB`;

function chosen(filters) {
  const all = readdirSync(folder)
    .filter((name) => name.endsWith('.bench.ts'))
    .sort();
  const picked = all.filter((name) => filters.length === 0 || filters.some((filter) => name.includes(filter)));
  if (picked.length > 0) return picked;
  const known = all.map((name) => name.replace('.bench.ts', '')).join(', ') || 'none yet';
  throw new Problem(`no benchmark matches "${filters.join(' ')}". There are: ${known}.`);
}

/** Bundles one benchmark next to node_modules, so that packages resolve, and runs it. */
async function runOne(name, output) {
  const { build } = await import('esbuild');
  const outfile = join(output, `${basename(name, '.ts')}.mjs`);
  await build({
    entryPoints: [join(folder, name)],
    outfile,
    bundle: true,
    platform: 'node',
    format: 'esm',
    target: 'node20',
    packages: 'external',
    sourcemap: true,
    logLevel: 'warning',
  });
  console.log(`\n== ${name.replace('.bench.ts', '')}`);
  const env = { ...jupyterEnvironment(), COEVAL_PYTHON: venvPython, COEVAL_ROOT: root };
  // Memory can be measured only when the collector can be called.
  const run = spawnSync(process.execPath, ['--enable-source-maps', '--expose-gc', outfile], {
    cwd: root,
    stdio: 'inherit',
    env,
  });
  return run.status === 0;
}

await runCommand('bench', async () => {
  const names = chosen(process.argv.slice(2));
  await setUp({ tests: true });
  console.log(describeMachine());
  mkdirSync(inRoot('test', '.output'), { recursive: true });
  const output = mkdtempSync(inRoot('test', '.output', 'bench-'));
  const failed = [];
  try {
    for (const name of names) if (!(await runOne(name, output))) failed.push(name);
  } finally {
    rmSync(output, { recursive: true, force: true });
  }
  if (failed.length > 0) throw new Problem(`failed: ${failed.join(', ')}`);
});
