import { mkdirSync, mkdtempSync, readdirSync, readFileSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { build } from '../../kernel-lib/commands/build.mjs';
import { executeNotebook } from '../../kernel-lib/commands/execute.mjs';
import { resultLine } from '../../kernel-lib/commands/notebook-outputs.mjs';
import { notebookFor } from '../../kernel-lib/commands/notebook-template.mjs';
import { inRoot } from '../../kernel-lib/commands/paths.mjs';
import { exportReport } from '../../kernel-lib/report/export-report';
import { closeBrowser, figuresDrawn, fileAddress, openPage, takePicture } from '../browser/page';

const FLAGSHIP = '01-from-field-to-age.ipynb';
const shelf = inRoot('notebooks');
const silent = { line: () => {}, update: () => {}, end: () => {} };
const truth = JSON.parse(readFileSync(inRoot('data-demo', 'calvessa-truth.json'), 'utf8'));

let folder: string;
beforeAll(async () => {
  await build();
  mkdirSync(join(shelf, 'results'), { recursive: true });
  folder = mkdtempSync(join(shelf, 'results', 'shelf-'));
});
afterAll(async () => {
  await closeBrowser();
  if (folder) rmSync(folder, { recursive: true, force: true });
});

const run = async (name: string) => {
  const executed = join(folder, name);
  const { notebook } = await executeNotebook(join(shelf, name), executed, { progress: silent, isTerminal: false });
  return { notebook, report: (await exportReport({ notebook: executed })).path };
};

/** Title and axes of every figure as Plotly drew it: range, and whether it is logarithmic. */
const drawnAxes = () =>
  Array.from(document.querySelectorAll('[data-fig] .js-plotly-plot, [data-fig].js-plotly-plot'), (plot) => {
    const layout = (
      plot as unknown as { _fullLayout: Record<string, { text?: string; range?: number[]; type?: string }> }
    )._fullLayout;
    return {
      title: layout.title?.text,
      x: { range: layout.xaxis.range, type: layout.xaxis.type },
      y: { range: layout.yaxis.range, type: layout.yaxis.type },
    };
  });

describe('the notebooks: the flagship', () => {
  it('finds what is true of the invented cluster, and its report draws it the right way round', async () => {
    const { notebook, report } = await run(FLAGSHIP);
    const line = resultLine(notebook) ?? '';
    const number = (pattern: RegExp) => Number(pattern.exec(line)?.[1]);
    // Wide enough for any run that is right; the intervals themselves are held by the recovery test.
    expect(Math.abs(number(/Result: ([\d.]+)/) - truth.members)).toBeLessThan(10);
    expect(Math.abs(number(/distance ([\d.]+)/) / truth.distance - 1)).toBeLessThan(0.01);
    expect(Math.abs(number(/E\(B-V\) ([\d.]+)/) - truth.ebv)).toBeLessThan(0.02);
    expect(Math.abs(number(/age ([\d.]+)/) / truth.age - 1)).toBeLessThan(0.1);

    const { page, watch } = await openPage();
    await page.goto(fileAddress(report));
    await figuresDrawn(page, 5);
    await takePicture(page, 'flagship', { fullPage: true });
    expect(watch).toEqual({ errors: [], requests: [fileAddress(report)] });
    // Figures out of sight may rest as still pictures: bring each into view before it is asked.
    const seen: ReturnType<typeof drawnAxes> = [];
    for (const figure of await page.$$('[data-fig]')) {
      await figure.scrollIntoViewIfNeeded();
      await page.waitForTimeout(300);
      for (const axes of await page.evaluate(drawnAxes)) if (!seen.some((s) => s.title === axes.title)) seen.push(axes);
    }
    const find = (words: RegExp) => {
      const figure = seen.find((s) => words.test(s.title ?? ''));
      if (figure === undefined) throw new Error(`no figure ${words} among ${seen.map((s) => s.title).join(', ')}`);
      const rises = (range: number[] | undefined) => (range as number[])[1] > (range as number[])[0];
      return { x: rises(figure.x.range), y: rises(figure.y.range), types: [figure.x.type, figure.y.type] };
    };
    // Hot stars left, luminous ones up, both logarithmic; bright stars up; right ascension grows to the left.
    expect(find(/Hertzsprung/)).toEqual({ x: false, y: true, types: ['log', 'log'] });
    expect(find(/Colour-magnitude/)).toEqual({ x: true, y: false, types: ['linear', 'linear'] });
    expect(find(/Sky/)).toEqual({ x: false, y: true, types: ['linear', 'linear'] });
    expect(find(/Proper motions/)).toEqual({ x: true, y: true, types: ['linear', 'linear'] });
    const text = await page.evaluate(() => document.body.textContent);
    expect(text).toContain('Before you quote these');
    await page.context().close();
  });

  it('is the notebook that a user gets for a catalogue of their own', () => {
    const stored = JSON.parse(readFileSync(join(shelf, FLAGSHIP), 'utf8'));
    const made = notebookFor({
      title: 'Calvessa',
      source: '../data-demo/calvessa-field.csv',
      introduction: stored.cells[0].source.join('').split('\n').slice(2).join('\n'),
      roles: Object.fromEntries(
        ['rightAscension', 'declination', 'magnitude.G', 'magnitude.BP', 'magnitude.RP'].map((role) => [role, 'x']),
      ),
    });
    expect(stored.cells).toEqual(made.cells);
  });

  const others = readdirSync(shelf).filter((name) => name.endsWith('.ipynb') && name !== FLAGSHIP);
  for (const name of others) {
    it(`stands beside ${name}, which runs without an error`, async () => {
      const { notebook } = await run(name);
      const code = notebook.cells.filter((cell: { cell_type: string }) => cell.cell_type === 'code');
      expect(code.every((cell: { execution_count: number | null }) => cell.execution_count !== null)).toBe(true);
    });
  }
});
