import { spawnSync } from 'node:child_process';
import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { join } from 'node:path';
import { inRoot, root } from '../kernel-lib/commands/paths.mjs';

const compiler = inRoot('node_modules', '@tslab', 'typescript-for-tslab', 'bin', 'tsc');

// As a cell is read: TypeScript 5.0.4, no DOM. Library files are checked here, since a cell would take their errors as `any`.
const settings = {
  compilerOptions: {
    target: 'es2022',
    module: 'commonjs',
    moduleResolution: 'node10',
    lib: ['es2022'],
    types: ['node'],
    esModuleInterop: true,
    noEmit: true,
  },
  files: ['cell.ts'],
};

const isName = (name) => /^[A-Za-z_$][\w$]*$/.test(name);

/** A cell that uses every exported value in a place where `any` does not fit. */
function cellUsing(names) {
  const lines = names.map((name) => `const ${name}_is_known: IsAny<typeof coeval.${name}> = false;`);
  return [
    "import * as coeval from 'coeval';",
    'type IsAny<T> = 0 extends 1 & T ? true : false;',
    ...lines,
    `export { ${names.map((name) => `${name}_is_known`).join(', ')} };`,
  ].join('\n');
}

/**
 * Reads the built declarations with the compiler inside the kernel.
 * @returns the errors in our own declarations and in a cell that uses them, a line each; empty when all is well
 */
export function kernelTypeErrors() {
  const names = Object.keys(createRequire(import.meta.url)(inRoot('kernel-lib', 'dist', 'index.js'))).filter(isName);
  // Inside notebooks/, where a user's cells resolve their imports.
  const results = inRoot('notebooks', 'results');
  mkdirSync(results, { recursive: true });
  const folder = mkdtempSync(join(results, 'types-'));
  try {
    writeFileSync(join(folder, 'cell.ts'), cellUsing(names));
    writeFileSync(join(folder, 'tsconfig.json'), JSON.stringify(settings));
    const run = spawnSync(process.execPath, [compiler, '-p', folder, '--pretty', 'false'], {
      cwd: root,
      encoding: 'utf8',
    });
    const lines = `${run.stdout}${run.stderr}`.split('\n').filter((line) => line.includes('error TS'));
    const ours = lines.filter((line) => /^(kernel-lib|notebooks)\//.test(line) || !line.includes('('));
    if (run.status !== 0 && lines.length === 0)
      return [`the kernel's compiler ended with status ${run.status}: ${run.stderr}`];
    return ours;
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}
