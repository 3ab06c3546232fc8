import { existsSync, readFileSync, realpathSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { pipEnvironment, setUpFolder, venv, venvPython } from './environment.mjs';
import { inRoot, root } from './paths.mjs';
import { Problem } from './problem.mjs';
import { findPython } from './python.mjs';
import { runProgram } from './run-program.mjs';
import { hashOf, isStamped, stamp } from './stamp.mjs';

const userLists = [inRoot('kernel-lib', 'commands', 'requirements.txt')];
const testLists = [inRoot('test', 'requirements.txt'), inRoot('test', 'requirements-data.txt')];
const madeStamp = join(venv, '.made');
const underWay = join(venv, '.under-way');

const groups = {
  user: { lists: userLists, stampFile: join(venv, '.user-packages'), title: 'JupyterLab and what it needs' },
  tests: { lists: testLists, stampFile: join(venv, '.test-packages'), title: 'Python packages for the tests' },
};

// A virtual environment knows its own address and its interpreter; when either changed it must be made anew.
const identity = () => `${root}\n${realpathSync(venvPython)}\n`;

const isMade = () => existsSync(venvPython) && !existsSync(underWay) && isStamped(madeStamp, identity());
const isInstalled = ({ lists, stampFile }) => isStamped(stampFile, hashOf(lists, root));
const wantedGroups = (tests) => (tests ? [groups.user, groups.tests] : [groups.user]);

/** True when .venv stands and holds what is asked for. */
export const arePythonPackagesInstalled = ({ tests }) => isMade() && wantedGroups(tests).every(isInstalled);

async function makeVenv(progress) {
  const python = findPython();
  progress.line('Making the Python environment .venv ...');
  rmSync(venv, { recursive: true, force: true });
  const run = await runProgram(python, ['-m', 'venv', venv], { cwd: root, env: pipEnvironment() });
  if (run.status !== 0) throw new Problem(`${python} could not make the virtual environment ${venv}:\n${run.tail}`);
  stamp(madeStamp, identity());
}

const countOf = (lists) => lists.map((list) => readFileSync(list, 'utf8').match(/^[a-z].*==/gim)?.length ?? 0);

async function install({ lists, stampFile, title }, progress) {
  const total = countOf(lists).reduce((sum, count) => sum + count, 0);
  progress.line(`Installing ${title} (once, a minute or two) ...`);
  // While this file stands the environment may be half filled; a run that finds it begins anew.
  stamp(underWay, '');
  let done = 0;
  const onLine = (line) => {
    // Lines "ignored: markers ..." are for other Pythons; they count, as they are part of the list.
    if (/^(Collecting|Requirement already|Ignoring) /.test(line)) done += 1;
    if (line.startsWith('Installing collected')) progress.update('  writing them to .venv ...');
    else if (done > 0) progress.update(`  ${Math.min(done, total)} of ${total} looked at`);
  };
  // The lists are complete, so pip need not work out dependencies; one of them asks for a Python it does not need.
  const options = ['--no-deps', '--ignore-requires-python', '--no-input', '--progress-bar', 'off'];
  const log = join(setUpFolder, 'pip.log');
  const parameters = ['-m', 'pip', 'install', ...options, ...lists.flatMap((list) => ['-r', list])];
  const run = await runProgram(venvPython, parameters, { cwd: root, env: pipEnvironment(), log, onLine });
  progress.end();
  if (run.status !== 0) {
    throw new Problem(`pip could not install ${title}; its last lines (all of them: ${log}):\n${run.tail}`);
  }
  stamp(stampFile, hashOf(lists, root));
  rmSync(underWay, { force: true });
}

/** Makes .venv and fills it with the pinned packages, as far as that has not been done yet. */
export async function installPythonPackages({ tests, progress }) {
  if (!isMade()) await makeVenv(progress);
  for (const group of wantedGroups(tests)) {
    if (!isInstalled(group)) await install(group, progress);
  }
}
