import { spawn } from 'node:child_process';
import { createWriteStream, mkdirSync } from 'node:fs';
import { basename, dirname, join } from 'node:path';
import { createInterface } from 'node:readline';
import { jupyterEnvironment, setUpFolder, venvPython } from './environment.mjs';
import { Problem } from './problem.mjs';

/** Whether a browser window could be seen by whoever started this. */
export const hasDisplay = (
  env = process.env,
  platform = process.platform,
  isTerminal = process.stdout.isTTY === true,
) => isTerminal && (platform === 'darwin' || Boolean(env.DISPLAY || env.WAYLAND_DISPLAY));

/** Arguments of JupyterLab: this machine only, a free port, the folder of the notebook as its root. */
export function labArguments(notebook, { openBrowser, isRoot }) {
  return [
    '-m',
    'jupyterlab',
    '--ip=127.0.0.1',
    '--ServerApp.port_retries=100',
    `--ServerApp.root_dir=${dirname(notebook)}`,
    `--LabApp.default_url=/lab/tree/${encodeURIComponent(basename(notebook))}`,
    // Without it the server would ask on the terminal whether Ctrl-C was meant.
    '--ServerApp.answer_yes=True',
    ...(openBrowser ? [] : ['--no-browser']),
    ...(isRoot ? ['--allow-root'] : []),
  ];
}

/**
 * Starts JupyterLab on a notebook, prints its address, and waits until it ends (Ctrl-C).
 * @param say receives the lines for the user
 * @returns the exit status: 0 after Ctrl-C
 */
export async function runLab(notebook, { say = console.log } = {}) {
  const env = jupyterEnvironment();
  const log = join(setUpFolder, 'jupyterlab.log');
  mkdirSync(env.JUPYTER_RUNTIME_DIR, { recursive: true });
  const file = createWriteStream(log);
  const parameters = labArguments(notebook, { openBrowser: hasDisplay(), isRoot: process.getuid?.() === 0 });
  const child = spawn(venvPython, parameters, { env, stdio: ['ignore', 'pipe', 'pipe'] });
  const tail = [];
  let address = null;
  let asked = false;
  const take = (line) => {
    file.write(`${line}\n`);
    tail.push(line);
    if (tail.length > 12) tail.shift();
    const found = line.match(/(http:\/\/127\.0\.0\.1:\d+\/lab\S*)/);
    if (address !== null || !found) return;
    address = found[1];
    say(`JupyterLab: ${address}`);
    say('Ctrl-C ends it.');
  };
  createInterface({ input: child.stdout }).on('line', take);
  createInterface({ input: child.stderr }).on('line', take);
  const stop = () => {
    asked = true;
    child.kill('SIGTERM');
  };
  for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) process.on(signal, stop);
  const status = await new Promise((resolve, reject) => {
    child.on('error', reject);
    child.on('close', resolve);
  });
  for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) process.removeListener(signal, stop);
  file.end();
  if (asked) {
    say('\nJupyterLab has ended.');
    return 0;
  }
  if (status === 0) return 0;
  throw new Problem(`JupyterLab ended by itself; its last lines (all of them: ${log}):\n${tail.join('\n')}`);
}
