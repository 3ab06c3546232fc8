import { escapeHtml } from '../quantity/present';

/** How far a job is. */
export interface ProgressState {
  readonly title: string;
  /** Steps done and steps in all; the total may be unknown (NaN or Infinity). */
  readonly done: number;
  readonly total: number;
  /** Seconds since the start. */
  readonly elapsed: number;
  readonly note?: string;
  readonly ended: boolean;
}

/**
 * One line saying how far a job is and how long it will still take, if it goes on at the pace so far.
 * @example progressText({ title: 'Bootstrap', done: 50, total: 200, elapsed: 4, ended: false })
 *   // => 'Bootstrap: 50 of 200 (25 %), about 12 s left'
 */
export function progressText(state: ProgressState): string {
  const { title, done, total, elapsed, note, ended } = state;
  const known = Number.isFinite(total) && total > 0;
  const count = (n: number) => n.toLocaleString('en-US', { maximumFractionDigits: 1 });
  const percent = `${Math.floor(100 * fraction(state))} %`;
  // A total of 1 is a share of the work, not a number of steps.
  const parts = [!known ? count(done) : total === 1 ? percent : `${count(done)} of ${count(total)} (${percent})`];
  const left = secondsLeft(state);
  if (ended) parts.push(`took ${durationText(elapsed)}`);
  else if (!Number.isNaN(left)) parts.push(`about ${durationText(left)} left`);
  if (note) parts.push(note);
  return `${title}: ${parts.join(', ')}`;
}

/** The same with a bar; text from outside is escaped. */
export function progressHtml(state: ProgressState): string {
  const known = Number.isFinite(state.total) && state.total > 0;
  const value = state.ended ? 1 : fraction(state);
  const bar = `<progress style="width:16em;vertical-align:middle" max="1"${known || state.ended ? ` value="${value}"` : ''} aria-label="${escapeHtml(state.title)}"></progress>`;
  return `<div role="status">${bar} ${escapeHtml(progressText(state))}</div>`;
}

/** Seconds a job still takes at its pace so far; NaN in the first second and where the total is unknown. */
export function secondsLeft({ done, total, elapsed }: ProgressState): number {
  if (!(elapsed >= 1) || !(done > 0) || !Number.isFinite(total) || done > total) return Number.NaN;
  return (elapsed * (total - done)) / done;
}

/** Seconds as a person says them: 0.4 s, 12 s, 3 min 05 s, 2 h 10 min. */
export function durationText(seconds: number): string {
  if (seconds < 9.95) return `${seconds.toFixed(1)} s`;
  const whole = Math.round(seconds);
  if (whole < 60) return `${whole} s`;
  const two = (n: number) => String(n).padStart(2, '0');
  if (whole < 3600) return `${Math.floor(whole / 60)} min ${two(whole % 60)} s`;
  const minutes = Math.round(seconds / 60);
  return `${Math.floor(minutes / 60)} h ${two(minutes % 60)} min`;
}

const fraction = ({ done, total }: ProgressState) => Math.min(1, Math.max(0, done / total));
