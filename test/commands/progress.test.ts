import { describe, expect, it } from 'vitest';
import { createProgress, duration } from '../../kernel-lib/commands/progress.mjs';

function writable(properties: object) {
  const written: string[] = [];
  return { stream: { write: (text: string) => written.push(text), ...properties }, written };
}

describe('duration', () => {
  it('is in seconds, then minutes', () => {
    expect(duration(4.4)).toBe('4 s');
    expect(duration(59.4)).toBe('59 s');
    expect(duration(59.6)).toBe('1 min 0 s');
    expect(duration(135)).toBe('2 min 15 s');
  });
});

describe('createProgress', () => {
  it('rewrites one line on a terminal, never longer than the terminal is wide', () => {
    const { stream, written } = writable({ isTTY: true, columns: 10 });
    const progress = createProgress(stream as never);
    progress.update('cell 1 of 20: Members');
    progress.update('cell 2');
    progress.line('done');
    expect(written.join('')).toBe('cell 1 of\r\x1b[2Kcell 2\r\x1b[2Kdone\n');
  });

  it('adds whole lines to a log, and does not flood it', () => {
    const { stream, written } = writable({ isTTY: false });
    const progress = createProgress(stream as never);
    progress.line('begin');
    for (let i = 0; i < 50; i++) progress.update(`step ${i}`);
    progress.end();
    expect(written).toEqual(['begin\n']);
  });
});
