import { spawnSync } from 'node:child_process';
import { accessSync, constants, existsSync } from 'node:fs';
import { join } from 'node:path';
import { setUpFolder } from '../kernel-lib/commands/environment.mjs';
import { Problem } from '../kernel-lib/commands/problem.mjs';
import { runProgram } from '../kernel-lib/commands/run-program.mjs';

const names = ['chromium', 'chromium-browser', 'google-chrome', 'google-chrome-stable', 'chrome'];
const places = [
  '/Applications/Google Chrome.app/Contents/MacOS/Google Chrome',
  '/Applications/Chromium.app/Contents/MacOS/Chromium',
];

function isProgram(path) {
  try {
    accessSync(path, constants.X_OK);
    return true;
  } catch {
    return false;
  }
}

/** Path of a Chromium or Chrome: CHROME_PATH if set, else the first on the path; null when there is none. */
export function findChromium(env = process.env) {
  if (env.CHROME_PATH) return isProgram(env.CHROME_PATH) ? env.CHROME_PATH : null;
  const folders = (env.PATH ?? '').split(':').filter(Boolean);
  const found = names.flatMap((name) => folders.map((folder) => join(folder, name)));
  return [...found, ...places].find(isProgram) ?? null;
}

const canInstall = () =>
  process.getuid?.() === 0 && existsSync('/etc/debian_version') && spawnSync('apt-get', ['--version']).status === 0;

async function install(progress) {
  progress.line('Installing Chromium from the packages of this system ...');
  const env = { ...process.env, DEBIAN_FRONTEND: 'noninteractive' };
  const log = join(setUpFolder, 'apt.log');
  await runProgram('apt-get', ['update'], { env, log });
  // Without a font every label in a screenshot would be an empty box.
  const packages = ['chromium', 'fonts-dejavu-core'];
  const run = await runProgram('apt-get', ['install', '-y', '--no-install-recommends', ...packages], { env, log });
  if (run.status !== 0) throw new Problem(`apt-get could not install chromium (see ${log}):\n${run.tail}`);
}

/**
 * Finds a browser for the tests; as root on Debian installs one where none is.
 * @throws Problem with one line that says how to get one
 */
export async function needChromium(progress) {
  if (process.env.CHROME_PATH && !findChromium()) {
    throw new Problem(
      `CHROME_PATH is ${process.env.CHROME_PATH}, which is not a program. Point it at Chromium or Chrome, or unset it.`,
    );
  }
  if (!findChromium() && canInstall()) await install(progress);
  const path = findChromium();
  if (path) return path;
  throw new Problem(
    'the tests need Chromium or Chrome and found none. Debian: apt-get install chromium; else install Chrome, or set CHROME_PATH to it.',
  );
}
