import { randomBytes } from 'node:crypto';
import { performance } from 'node:perf_hooks';
import { checkChoice, checkOptions } from '../quantity/options';
import { connectKernel, type Kernel } from './kernel';
import { type ProgressState, progressHtml, progressText } from './progress-line';

/** What long jobs call as they go on: steps done, steps in all, and what they are at. */
export type OnProgress = (done: number, total: number, note?: string) => void;

/** A display of how far a job is. */
export interface Progress extends OnProgress {
  /** Shows that the job has ended, where it does not report its last step itself. */
  end(note?: string): void;
}

/** Options of `progress`. */
export interface ProgressOptions {
  /**
   * Outside a notebook: `line` rewrites one line of the terminal, `silent` prints nothing, `auto` is `line` on a terminal and
   * `silent` elsewhere. Default `auto`.
   */
  readonly terminal?: 'auto' | 'line' | 'silent';
}

/**
 * A display of how far a long job is, with the time left. In a notebook one output updates in place; pass it wherever a
 * job takes `onProgress`. Updates are spaced at least a fifth of a second apart, so it may be called at every step.
 * @param title what is going on
 * @throws TypeError for an unknown option or choice
 * @example await fitIsochrone(members, { onProgress: progress('Fitting') })
 */
export function progress(title: string, options: ProgressOptions = {}): Progress {
  checkOptions('progress', options, ['terminal']);
  const { terminal = 'auto' } = options;
  checkChoice('progress', 'terminal', terminal, ['auto', 'line', 'silent']);
  const kernel = connectKernel();
  const line = terminal === 'line' || (terminal === 'auto' && process.stderr.isTTY === true);
  const draw = kernel !== null ? cellDisplay(kernel) : line ? terminalLine(process.stderr) : () => {};
  return trackProgress(title, draw, () => performance.now() / 1000);
}

/** Least time between two updates, s. */
const SPACING = 0.2;

/**
 * Turns calls at any rate into spaced updates; the first, the last and a changed end are always drawn.
 * @param draw  shows a state
 * @param clock seconds, from any start
 */
export function trackProgress(title: string, draw: (state: ProgressState) => void, clock: () => number): Progress {
  const started = clock();
  let drawnAt = Number.NEGATIVE_INFINITY;
  let last = { done: 0, total: Number.NaN, note: undefined as string | undefined };
  let ended = false;
  const put = () => {
    drawnAt = clock();
    draw({ title, ...last, elapsed: drawnAt - started, ended });
  };
  const report = ((done, total, note) => {
    if (ended && done >= total) return;
    last = { done, total, note };
    ended = done >= total;
    if (ended || clock() - drawnAt >= SPACING) put();
  }) as Progress;
  report.end = (note) => {
    if (ended && note === undefined) return;
    ended = true;
    last = { ...last, note: note ?? last.note };
    put();
  };
  return report;
}

function cellDisplay(kernel: Kernel): (state: ProgressState) => void {
  const id = `coeval-progress-${randomBytes(8).toString('hex')}`;
  let shown = false;
  return (state) => {
    kernel.display({ 'text/html': progressHtml(state), 'text/plain': progressText(state) }, id, shown);
    shown = true;
  };
}

function terminalLine(stream: { write(text: string): unknown }): (state: ProgressState) => void {
  return (state) => {
    // Return to the start of the line, print, clear what an earlier, longer text left.
    stream.write(`\r${progressText(state)}\u001b[K${state.ended ? '\n' : ''}`);
  };
}
