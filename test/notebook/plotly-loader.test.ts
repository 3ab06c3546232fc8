import { gunzipSync } from 'node:zlib';
import { describe, expect, it } from 'vitest';
import type { CellRun } from '../../kernel-lib/notebook/kernel';
import { createPlotlyCarrier, LOADER_PATTERN, loaderKey, plotlyLoader } from '../../kernel-lib/notebook/plotly-loader';
import { runCells } from '../kernel/run-cells';

/** A kernel that only counts what is shown. */
function fakeKernel() {
  const listeners: ((cell: CellRun) => void)[] = [];
  let cell: CellRun = { cellId: null, code: null, deletedCells: [] };
  let brought = 0;
  const carrier = createPlotlyCarrier({
    display: () => {
      brought++;
    },
    currentCell: () => cell,
    onCellStart: (listener) => void listeners.push(listener),
  });
  return {
    /** Runs a cell that shows figures; returns how often the loader came. */
    run(next: Partial<CellRun>, figures = 1): number {
      cell = { cellId: null, code: null, deletedCells: [], ...next };
      for (const listener of listeners) listener(cell);
      return this.show(figures);
    },
    show(figures = 1): number {
      const before = brought;
      for (let i = 0; i < figures; i++) carrier.bring();
      return brought - before;
    },
    currentCell: () => cell,
  };
}

describe('the loader comes', () => {
  it('once for many figures in many cells', () => {
    const kernel = fakeKernel();
    expect(kernel.run({ cellId: 'a', code: '1' }, 3)).toBe(1);
    expect(kernel.run({ cellId: 'b', code: '1' }, 2)).toBe(0);
  });

  it('again when its cell runs again, and only then', () => {
    const kernel = fakeKernel();
    expect(kernel.run({ cellId: 'a', code: '1' })).toBe(1);
    expect(kernel.run({ cellId: 'b', code: '2' })).toBe(0);
    expect(kernel.run({ cellId: 'a', code: 'changed' })).toBe(1);
  });

  it('with the next figure when its cell ran again and shows none any more', () => {
    const kernel = fakeKernel();
    kernel.run({ cellId: 'a', code: '1' });
    expect(kernel.run({ cellId: 'a', code: '1' }, 0)).toBe(0);
    expect(kernel.run({ cellId: 'b', code: '2' })).toBe(1);
  });

  it('again when its cell was deleted', () => {
    const kernel = fakeKernel();
    kernel.run({ cellId: 'a', code: '1' });
    expect(kernel.run({ cellId: 'b', code: '2', deletedCells: ['x'] })).toBe(0);
    expect(kernel.run({ cellId: 'c', code: '3', deletedCells: ['x', 'a'] })).toBe(1);
  });

  it('by the code where cells have no names', () => {
    const kernel = fakeKernel();
    expect(kernel.run({ code: '1' })).toBe(1);
    expect(kernel.run({ code: '2' })).toBe(0);
    expect(kernel.run({ code: '1' })).toBe(1);
  });

  it('again when nothing is known of the cell that had it, as of the one that imports the library', () => {
    const kernel = fakeKernel();
    expect(kernel.show()).toBe(1);
    expect(kernel.run({ cellId: 'a', code: '1' })).toBe(1);
    expect(kernel.run({ cellId: 'b', code: '2' })).toBe(0);
  });

  it('once when the name of that cell becomes known before the next one starts', () => {
    const kernel = fakeKernel();
    expect(kernel.show()).toBe(1);
    Object.assign(kernel.currentCell(), { cellId: 'import', code: 'import' });
    expect(kernel.run({ cellId: 'a', code: '1' })).toBe(0);
    expect(kernel.run({ cellId: 'import', code: 'import' })).toBe(1);
  });

  it('in a real kernel: with the import, not again, again on a second run and after a deletion', async () => {
    const figure = "new Figure([{ type: 'bar', x: [1], y: [2] }], { xaxis: {}, yaxis: {} }, 'bar')";
    const importing = `import { Figure } from 'coeval'; ${figure}`;
    const cells = await runCells([
      { code: importing, cellId: 'a' },
      { code: figure, cellId: 'b' },
      { code: importing, cellId: 'a' },
      { code: figure, cellId: 'b', deletedCells: ['c'] },
      { code: figure, cellId: 'b', deletedCells: ['a'] },
    ]);
    const loads = (html: string) => html.includes('data-plotly=');
    expect(cells.map((cell) => cell.displays.filter((d) => loads(d['text/html'])).length)).toEqual([1, 0, 1, 0, 1]);
  });
});

describe('the loader', () => {
  it('carries Plotly whole and is found in a page by its pattern', () => {
    const html = plotlyLoader();
    expect(plotlyLoader()).toBe(html);
    const found = [...`<p>1 < 2</p>${html}<p>${html}</p>`.matchAll(LOADER_PATTERN)];
    expect(found.map((match) => match[1])).toEqual([loaderKey(), loaderKey()]);
    expect(found[0][0]).toBe(html);
    const packed = />([A-Za-z0-9+/=]+)<\/script>/.exec(html)?.[1] ?? '';
    expect(gunzipSync(Buffer.from(packed, 'base64')).toString('utf8', 0, 400)).toContain('plotly.js v4.1.2');
  });
});
