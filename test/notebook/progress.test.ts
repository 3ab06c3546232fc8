import { describe, expect, it } from 'vitest';
import { progress, trackProgress } from '../../kernel-lib/notebook/progress';
import { durationText, type ProgressState, progressHtml, progressText } from '../../kernel-lib/notebook/progress-line';
import { runCells } from '../kernel/run-cells';

const state: ProgressState = { title: 'Bootstrap', done: 50, total: 200, elapsed: 4, ended: false };

/** A progress whose clock the test turns. */
function turned() {
  const drawn: ProgressState[] = [];
  let now = 100;
  const report = trackProgress(
    'Job',
    (s) => void drawn.push(s),
    () => now,
  );
  return {
    drawn,
    report,
    turn: (seconds: number) => {
      now += seconds;
    },
  };
}

describe('progressText', () => {
  it('says how far and how long still', () => {
    expect(progressText(state)).toBe('Bootstrap: 50 of 200 (25 %), about 12 s left');
    expect(progressText({ ...state, elapsed: 0.5, note: 'start 3' })).toBe('Bootstrap: 50 of 200 (25 %), start 3');
    expect(progressText({ ...state, done: 200, ended: true })).toBe('Bootstrap: 200 of 200 (100 %), took 4.0 s');
    expect(progressText({ ...state, total: Number.NaN })).toBe('Bootstrap: 50');
    expect(progressText({ ...state, done: 1e6, total: 2e6 })).toContain('1,000,000 of 2,000,000 (50 %)');
    expect(progressText({ ...state, done: 0 })).toBe('Bootstrap: 0 of 200 (0 %)');
  });

  it('says times as a person does', () => {
    const seconds = [0, 9.94, 9.96, 59.4, 59.6, 185, 3599.4, 7800];
    expect(seconds.map(durationText)).toEqual([
      '0.0 s',
      '9.9 s',
      '10 s',
      '59 s',
      '1 min 00 s',
      '3 min 05 s',
      '59 min 59 s',
      '2 h 10 min',
    ]);
  });

  it('shows what it is given as text', () => {
    const html = progressHtml({ ...state, title: '<b>"x"', note: '<script>' });
    expect(html).not.toMatch(/<b>|<script>/);
    expect(html).toContain('value="0.25"');
    expect(progressHtml({ ...state, total: Number.NaN })).not.toContain('value=');
  });
});

describe('trackProgress', () => {
  it('draws the first report, then at most five a second, and always the last', () => {
    const { drawn, report, turn } = turned();
    for (let i = 0; i <= 1000; i++) {
      report(i, 1000);
      turn(0.001);
    }
    expect(drawn.map((s) => s.done)).toEqual([0, 200, 400, 600, 800, 1000]);
    expect(drawn.map((s) => s.ended)).toEqual([false, false, false, false, false, true]);
    expect(drawn[3].elapsed).toBeCloseTo(0.6, 9);
  });

  it('ends when told to, once', () => {
    const { drawn, report, turn } = turned();
    report(1, 10, 'warming up');
    turn(3);
    report.end();
    report.end();
    expect(drawn.map((s) => [s.done, s.ended, s.note])).toEqual([
      [1, false, 'warming up'],
      [1, true, 'warming up'],
    ]);
  });

  it('starts anew when a job reports a lower step after its end', () => {
    const { drawn, report, turn } = turned();
    report(5, 5);
    turn(1);
    report(1, 5);
    report(5, 5);
    expect(drawn.map((s) => [s.done, s.ended])).toEqual([
      [5, true],
      [1, false],
      [5, true],
    ]);
  });
});

describe('progress', () => {
  it('refuses what it does not know', () => {
    expect(() => progress('x', { terminl: 'line' } as never)).toThrow(/unknown option "terminl".*terminal/);
    expect(() => progress('x', { terminal: 'loud' as never })).toThrow(/auto, line, silent/);
  });

  it('updates one output in place in a real kernel', async () => {
    const [, cell] = await runCells([
      "import { progress } from 'coeval';",
      `const report = progress('Walk <b>');
       for (let i = 0; i <= 40; i++) { report(i, 40); await new Promise((r) => setTimeout(r, 25)); }`,
    ]);
    expect(cell.status).toBe('ok');
    const kinds = cell.messages.map((m) => m.type).filter((type) => type.includes('display'));
    expect(kinds[0]).toBe('display_data');
    expect(kinds.slice(1).length).toBeGreaterThanOrEqual(2);
    expect(new Set(kinds.slice(1))).toEqual(new Set(['update_display_data']));
    expect(kinds.length).toBeLessThan(15);
    expect(cell.displays).toHaveLength(1);
    expect(cell.displays[0]['text/plain']).toMatch(/^Walk <b>: 40 of 40 \(100 %\), took \d/);
    expect(cell.displays[0]['text/html']).not.toContain('<b>');
    expect(cell.stdout).toBe('');
  });
});
