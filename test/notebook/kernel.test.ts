import { beforeAll, describe, expect, it, vi } from 'vitest';
import { connectKernel } from '../../kernel-lib/notebook/kernel';
import { type CellResult, runCells, runCellsAndEnd } from '../kernel/run-cells';

const lines = (n: number) => Array.from({ length: n }, (_, i) => `line ${i}\n`).join('');
const inputs = (cell: CellResult) =>
  cell.messages.filter((m) => m.type === 'execute_input').map((m) => m.content.execution_count);

describe('in a real kernel', () => {
  let cells: CellResult[];
  let ended: boolean;

  beforeAll(async () => {
    ({ cells, ended } = await runCellsAndEnd(
      [
        "import { measured } from 'coeval';",
        "for (let i = 0; i < 600; i++) console.log('line ' + i);",
        "for (let i = 0; i < 5000; i++) console.log('line ' + i);",
        'console.log("before"); throw new Error("as meant");',
        'null as never as number[]; let wrong: number = "text";',
        'await null; process.listenerCount("SIGINT")',
        'setTimeout(() => console.log("late"), 300); 1',
        '2',
      ],
      { linger: 1 },
    ));
  });

  it('600 and 5000 lines printed in a row all arrive', () => {
    expect(cells[1].stdout).toBe(lines(600));
    expect(cells[2].stdout).toBe(lines(5000));
    expect(cells[2].status).toBe('ok');
  });

  it('every run of a cell is numbered, the one that imports the library too', () => {
    expect(cells.map(inputs)).toEqual(cells.map((_, i) => [i + 1]));
    expect(cells.map((cell) => cell.count)).toEqual(cells.map((_, i) => i + 1));
    expect(cells[0].messages[0].content.code).toBe("import { measured } from 'coeval';");
  });

  it('an error in a cell says what it is, and the next cell runs', () => {
    expect(cells[3].status).toBe('error');
    expect(cells[3].stdout).toBe('before\n');
    expect(cells[3].stderr).toContain('Error: as meant');
    expect(cells[4].status).toBe('error');
    expect(cells[4].stderr).toContain("Type 'string' is not assignable to type 'number'");
  });

  it('the import adds no listener for interrupts', () => {
    expect(cells[5].stdout).toBe('1\n');
  });

  it('what is printed after a cell has ended comes out beneath the cell run last', () => {
    expect(cells[6].stdout).toBe('1\n');
    expect(cells[7].stdout).toBe('2\nlate\n');
  });

  it('the kernel ends by itself when asked to', () => {
    expect(ended).toBe(true);
  });
});

describe('cells sent all at once', () => {
  it('are numbered in order, those that were waiting when the library came too', async () => {
    const code = ['1', "import { measured } from 'coeval'; measured(1, 0, 2)", 'measured(2, 1, 3)', '4'];
    const cells = await runCells(code, { queue: true });
    // The first one ended before the library was there.
    expect(cells.map(inputs)).toEqual([[], [2], [3], [4]]);
    expect(cells.map((cell) => cell.messages.find((m) => m.type === 'execute_input')?.content.code)).toEqual([
      undefined,
      ...code.slice(1),
    ]);
    expect(cells[1].displays[0]['text/plain']).toBe('1.0 ± 1.0');
    expect(cells[2].displays[0]['text/plain']).toBe('2.0 ± 1.0');
  });
});

describe('elsewhere', () => {
  const key = Symbol.for('coeval.kernel');
  const shared = globalThis as Record<symbol | string, unknown>;

  it('there is no kernel and nothing is said', () => {
    const warn = vi.spyOn(console, 'warn');
    expect(connectKernel()).toBeNull();
    expect(warn).not.toHaveBeenCalled();
    warn.mockRestore();
  });

  it('in a kernel whose insides are strange it says so once and uses the public interface', () => {
    const shown: unknown[][] = [];
    const newDisplay = () => {
      const n = shown.push([]) - 1;
      return { raw: (...what: unknown[]) => void shown[n].push(what) };
    };
    const warn = vi.spyOn(console, 'warn').mockImplementation(() => {});
    const before = shared[key];
    try {
      delete shared[key];
      shared['__tslab__'] = { require: () => ({ newDisplay }) };
      const kernel = connectKernel();
      expect(connectKernel()).toBe(kernel);
      expect(kernel?.mended).toBe(false);
      expect(kernel?.isLastExpression()).toBe(false);
      kernel?.display({ 'text/html': '<b>1</b>', 'text/plain': '1' });
      kernel?.display({ 'text/plain': 'a' }, 'id');
      kernel?.display({ 'text/plain': 'b' }, 'id', true);
      expect(shown).toEqual([
        [['text/html', '<b>1</b>']],
        [
          ['text/plain', 'a'],
          ['text/plain', 'b'],
        ],
      ]);
      expect(warn).toHaveBeenCalledTimes(1);
      expect(warn.mock.calls[0][0]).toMatch(/tslab unknown .*npm install tslab@1\.0\.22/);
    } finally {
      warn.mockRestore();
      delete shared['__tslab__'];
      shared[key] = before;
    }
  });
});
