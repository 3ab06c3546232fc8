import { beforeAll, describe, expect, it } from 'vitest';
import { breathe, interruptible } from '../../kernel-lib/notebook/interruptible';
import { type CellResult, runCells } from '../kernel/run-cells';

describe('in a real kernel', () => {
  let cells: CellResult[];

  beforeAll(async () => {
    cells = await runCells([
      "import { interruptible } from 'coeval'; const breathe = () => new Promise((r) => setImmediate(r));",
      {
        code: `const part = await interruptible(async (signal) => {
          let n = 0;
          console.log('under way');
          while (!signal.aborted) { n++; await breathe(); }
          return n;
        });
        part > 0`,
        interrupt: { at: 'under way' },
      },
      'await null; part > 0 && process.listenerCount("SIGINT")',
      {
        code: `await interruptible(async (signal) => {
          signal.addEventListener('abort', () => console.log('under way: asked once'));
          console.log('under way');
          await new Promise((r) => setTimeout(r, 30_000).unref());
        });`,
        interrupt: { at: 'under way', times: 2 },
      },
      '3',
    ]);
  });

  it('the first interrupt lets the job return what it has, which the next cell knows', () => {
    expect([cells[1].status, cells[1].stdout, cells[1].stderr]).toEqual(['ok', 'under way\ntrue\n', '']);
    expect(cells[2].stdout).toBe('1\n');
  });

  it('the second interrupt stops the cell, and the kernel lives on', () => {
    expect(cells[3].status).toBe('error');
    expect(cells[3].stdout).toBe('under way\nunder way: asked once\n');
    expect(cells[3].stderr).toContain('Interrupted asynchronously');
    expect(cells[4].stdout).toBe('3\n');
  });
});

describe('interruptible', () => {
  const saved: string[] = [];
  const other = () => void saved.push('other');

  it('takes over interrupts while jobs run and gives them back after the last', async () => {
    process.on('SIGINT', other);
    const before = process.listeners('SIGINT');
    try {
      const ends: (() => void)[] = [];
      const job = (name: string) =>
        interruptible(async (signal) => {
          await new Promise<void>((resolve) => void ends.push(resolve));
          return `${name} ${signal.aborted}`;
        });
      const first = job('first');
      const second = job('second');
      expect(process.listeners('SIGINT')).toEqual(before);
      await breathe();
      expect(process.listeners('SIGINT')).not.toContain(other);
      process.emit('SIGINT');
      expect(saved).toEqual([]);
      process.emit('SIGINT');
      expect(saved).toEqual(['other']);
      ends[0]();
      expect(await first).toBe('first true');
      expect(process.listeners('SIGINT')).not.toContain(other);
      ends[1]();
      expect(await second).toBe('second true');
      expect(process.listeners('SIGINT')).toEqual(before);
    } finally {
      process.removeListener('SIGINT', other);
    }
  });

  it('gives back when the job fails, and passes its error on', async () => {
    const before = process.listeners('SIGINT');
    await expect(
      interruptible(() => {
        throw new Error('as meant');
      }),
    ).rejects.toThrow('as meant');
    expect(process.listeners('SIGINT')).toEqual(before);
  });
});
