import { existsSync, readFileSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { npmEnvironment, setUpFolder } from './environment.mjs';
import { inRoot, root } from './paths.mjs';
import { Problem } from './problem.mjs';
import { runProgram } from './run-program.mjs';

const readJson = (file) => JSON.parse(readFileSync(file, 'utf8'));

/**
 * Compares the lock file with the list npm keeps of what it installed.
 * @param locked    `packages` of package-lock.json
 * @param installed `packages` of node_modules/.package-lock.json
 * @returns true when every package that belongs on this machine is there in the locked version
 */
export function holdsAll(locked, installed) {
  return Object.entries(locked).every(([path, wanted]) => {
    if (!path.startsWith('node_modules/') || wanted.link) return true;
    const found = installed[path];
    if (!found) return wanted.optional === true || wanted.devOptional === true;
    return found.version === wanted.version && found.integrity === wanted.integrity;
  });
}

/** True when node_modules is what the lock file says. npm writes its list last, so a half-made folder has none. */
export function areNodePackagesInstalled() {
  const list = inRoot('node_modules', '.package-lock.json');
  if (!existsSync(list) || !existsSync(inRoot('node_modules', 'coeval', 'package.json'))) return false;
  return holdsAll(readJson(inRoot('package-lock.json')).packages, readJson(list).packages);
}

/** Installs the locked node packages. Nothing here needs an install script, so none is run whatever npm's version. */
export async function installNodePackages(progress) {
  progress.line('Installing node packages (once, under a minute as a rule) ...');
  const log = join(setUpFolder, 'npm.log');
  const npm = process.env.npm_execpath?.endsWith('.js') ? [process.execPath, process.env.npm_execpath] : ['npm'];
  const options = ['ci', '--ignore-scripts', '--include=dev', '--no-audit', '--no-fund', '--loglevel=error'];
  const { env, ownCache } = npmEnvironment();
  const run = await runProgram(npm[0], [...npm.slice(1), ...options], { cwd: root, env, log });
  if (ownCache !== null) rmSync(ownCache, { recursive: true, force: true });
  if (run.status !== 0) {
    throw new Problem(`npm could not install the node packages; its last lines (all of them: ${log}):\n${run.tail}`);
  }
}
