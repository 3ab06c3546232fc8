import { spawn } from 'node:child_process';
import { mkdirSync, readFileSync } from 'node:fs';
import { dirname } from 'node:path';
import { performance } from 'node:perf_hooks';
import { createInterface } from 'node:readline';
import { jupyterEnvironment, venvPython } from './environment.mjs';
import { errorOf, headingOf } from './notebook-outputs.mjs';
import { inRoot } from './paths.mjs';
import { Problem } from './problem.mjs';
import { duration } from './progress.mjs';

const runner = inRoot('kernel-lib', 'commands', 'run_notebook.py');

export const readNotebook = (path) => JSON.parse(readFileSync(path, 'utf8'));

/** A cell of the notebook failed; carries what a message needs. */
export class CellFailure extends Error {
  constructor({ number, heading, reason, output }) {
    super(`cell ${number} (${heading}) failed: ${reason}`);
    this.number = number;
    this.heading = heading;
    this.reason = reason;
    this.output = output;
  }
}

/** Turns the runner's events into progress: one line that is rewritten on a terminal, a line a heading in a log. */
function follow(cells, progress, isTerminal) {
  const code = cells.map((cell, index) => ({ cell, index })).filter(({ cell }) => cell.cell_type === 'code');
  const started = performance.now();
  let now = null;
  let lastHeading = null;
  const show = () => {
    if (now === null) return;
    progress.update(`${now}, ${duration((performance.now() - started) / 1000)}`);
  };
  const clock = setInterval(show, 1000);
  return {
    numberOf: (index) => code.findIndex((entry) => entry.index === index) + 1,
    cell(index) {
      const heading = headingOf(cells, index);
      now = `cell ${this.numberOf(index)} of ${code.length}: ${heading}`;
      if (isTerminal) show();
      else if (heading !== lastHeading) progress.line(now);
      lastHeading = heading;
    },
    end() {
      clearInterval(clock);
      progress.end();
    },
    elapsed: () => duration((performance.now() - started) / 1000),
  };
}

/**
 * Runs a notebook in the real kernel and writes it, with its outputs, to `output` (which may be the same file).
 * @returns an object { notebook, elapsed } the executed notebook, parsed, and how long it took
 * @throws CellFailure when a cell failed, Problem when the run could not go on; `output` is written in both cases
 */
export async function executeNotebook(source, output, { progress, isTerminal = process.stdout.isTTY === true }) {
  mkdirSync(dirname(output), { recursive: true });
  const { cells } = readNotebook(source);
  const watch = follow(cells, progress, isTerminal);
  const env = jupyterEnvironment();
  mkdirSync(env.JUPYTER_RUNTIME_DIR, { recursive: true });
  const child = spawn(venvPython, [runner, source, output], { env, stdio: ['ignore', 'pipe', 'pipe'] });
  // Ctrl-C on a terminal reaches the runner too, which leaves it to this one signal to end its kernel and save.
  let interrupted = false;
  const stop = () => {
    if (!interrupted) child.kill('SIGTERM');
    interrupted = true;
  };
  process.on('SIGINT', stop);
  process.on('SIGTERM', stop);
  const complaints = [];
  let last = null;
  createInterface({ input: child.stderr }).on('line', (line) => complaints.push(line));
  createInterface({ input: child.stdout }).on('line', (line) => {
    if (!line.startsWith('{')) return;
    last = JSON.parse(line);
    if (last.event === 'cell') watch.cell(last.index);
  });
  await new Promise((resolve, reject) => {
    child.on('error', reject);
    child.on('close', resolve);
  });
  process.removeListener('SIGINT', stop);
  process.removeListener('SIGTERM', stop);
  watch.end();
  if (last?.event === 'done') return { notebook: readNotebook(output), elapsed: watch.elapsed() };
  if (last?.event === 'failed') {
    const executed = readNotebook(output);
    const failed = executed.cells[last.index];
    const heading = headingOf(executed.cells, last.index);
    throw new CellFailure({ number: watch.numberOf(last.index), heading, reason: errorOf(failed), output });
  }
  if (last?.event === 'stopped') {
    const place = last.index >= 0 ? ` in cell ${watch.numberOf(last.index)} (${headingOf(cells, last.index)})` : '';
    throw new Problem(
      `the run ended early${place}: ${interrupted ? 'interrupted' : last.message}. What was done is in ${output}`,
    );
  }
  if (interrupted) throw new Problem('interrupted before the first cell.');
  throw new Problem(`the notebook could not be run:\n${complaints.slice(-12).join('\n')}`);
}
