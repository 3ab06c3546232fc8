import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import { setUpFolder } from './environment.mjs';
import { registerKernel } from './kernel-spec.mjs';
import { withLock } from './lock.mjs';
import { areNodePackagesInstalled, installNodePackages } from './node-packages.mjs';
import { Problem, runCommand } from './problem.mjs';
import { createProgress } from './progress.mjs';
import { arePythonPackagesInstalled, installPythonPackages } from './python-packages.mjs';

const oldestNode = [20, 19];

/** @throws Problem when this Node is too old, or the system is one where nothing of this was tried */
export function checkMachine(version = process.versions.node, platform = process.platform) {
  const [major, minor] = version.split('.').map(Number);
  if (major < oldestNode[0] || (major === oldestNode[0] && minor < oldestNode[1])) {
    throw new Problem(
      `Node ${oldestNode.join('.')} or newer is needed, this is ${version}. See nodejs.org, or your system's packages.`,
    );
  }
  if (platform === 'win32') throw new Problem('Windows itself is not supported; run this inside WSL (wsl --install).');
}

/**
 * Makes the machine ready: node packages, .venv, the kernel inside it, and the built library. Does only what is missing or
 * out of date, so it costs little when nothing is; a step that was interrupted is done again.
 * @param options.tests    install what the tests compare with, too
 * @param options.build    build the library (default true)
 * @param options.progress from createProgress()
 * @throws Problem with one line that says what to mend
 */
export async function setUp({ tests = false, build = true, progress = createProgress() } = {}) {
  checkMachine();
  await withLock(
    join(setUpFolder, 'lock'),
    async () => {
      if (!areNodePackagesInstalled()) await installNodePackages(progress);
      if (!arePythonPackagesInstalled({ tests })) await installPythonPackages({ tests, progress });
      registerKernel();
    },
    () => progress.line('Waiting for another set-up of this folder to end ...'),
  );
  if (!build) return;
  const { build: buildLibrary, BuildError } = await import('./build.mjs');
  try {
    await buildLibrary({ say: (line) => progress.line(`${line} ...`) });
  } catch (error) {
    throw error instanceof BuildError ? new Problem(error.message) : error;
  }
}

if (process.argv[1] && import.meta.url === pathToFileURL(process.argv[1]).href) {
  await runCommand('set-up', async () => {
    await setUp({ tests: process.argv.includes('--tests'), build: !process.argv.includes('--no-build') });
    console.log('Set-up is complete.');
  });
}
