import { inspect } from 'node:util';
import { beforeAll, describe, expect, it, vi } from 'vitest';
import { Figure } from '../../kernel-lib/diagrams/figure';
import { presenterFor, show } from '../../kernel-lib/notebook/display';
import { figureOutput } from '../../kernel-lib/notebook/figure-output';
import { loaderKey } from '../../kernel-lib/notebook/plotly-loader';
import { measured } from '../../kernel-lib/quantity/measured';
import { setPresenter } from '../../kernel-lib/quantity/present';
import { type CellResult, runCells } from '../kernel/run-cells';

const CSV = 'id,ra,dec,parallax,g\\n1,10.5,-3.2,5.1,12.3\\n2,10.6,-3.1,5.2,13.4\\n';
const AXES = "{ xaxis: { title: { text: 'x' } }, yaxis: { title: { text: 'y' } } }";

describe('in a real kernel', () => {
  let cells: CellResult[];

  beforeAll(async () => {
    cells = await runCells([
      "import { Figure, measured, readCatalogue, show } from 'coeval'; const age = measured(0.71, 0.68, 0.75, 'Gyr'); age",
      `const stars = await readCatalogue(new TextEncoder().encode('${CSV}'), { format: 'csv' }); stars`,
      `const figure = new Figure([{ type: 'scatter', mode: 'markers', x: [1, 2], y: [3, 4] }], ${AXES}, 'two stars'); figure`,
      'figure',
      '[age, age]',
      '({ age, figure })',
      "console.log(age); console.log('age', age); console.log(String(age)); await null; age",
      "show(age, 'plain', [age, figure]); 1",
      'console.error(age); process.stdout.write("after\\n"); age',
    ]);
  });

  it('every cell succeeds', () => {
    expect(cells.map((cell) => [cell.status, cell.stderr])).toEqual([
      ...Array.from({ length: 8 }, () => ['ok', '']),
      ['ok', '0.71 +0.04 -0.03 Gyr\n'],
    ]);
  });

  it('a value with its interval shows itself once, richly, as the last expression', () => {
    expect(cells[0].stdout).toBe('');
    expect(cells[0].displays).toEqual([
      { 'text/html': '<span>0.71 +0.04 -0.03 Gyr</span>', 'text/plain': '0.71 +0.04 -0.03 Gyr' },
    ]);
  });

  it('a catalogue shows a table', () => {
    expect(cells[1].stdout).toBe('');
    expect(cells[1].displays).toHaveLength(1);
    expect(cells[1].displays[0]['text/html']).toContain('<table');
    expect(cells[1].displays[0]['text/html']).toContain('parallax');
    expect(cells[1].displays[0]['text/plain']).toContain('parallax');
  });

  it('the first figure brings Plotly, the next does not', () => {
    expect(cells[2].displays).toHaveLength(2);
    expect(cells[2].displays[0]['text/html']).toContain('data-plotly');
    expect(cells[2].displays[0]['text/html'].length).toBeGreaterThan(1_500_000);
    expect(cells[2].displays[1]['text/html']).toContain('data:image/svg+xml;base64,');
    expect(cells[2].displays[1]['text/plain']).toMatch(/^Figure: two stars\n/);
    expect(cells[3].displays).toEqual([cells[2].displays[1]]);
  });

  it('an array of results prints each in short, a record too, with its figures drawn', () => {
    expect(cells[4].stdout).toBe('[ 0.71 +0.04 -0.03 Gyr, 0.71 +0.04 -0.03 Gyr ]\n');
    expect(cells[5].stdout).toBe('{ age: 0.71 +0.04 -0.03 Gyr, figure: Figure: two stars }\n');
    expect(cells[5].displays).toEqual([cells[2].displays[1]]);
  });

  it('what a cell prints itself stays text', () => {
    const text = '0.71 +0.04 -0.03 Gyr';
    expect(cells[6].stdout).toBe(`${text}\nage ${text}\n${text}\n`);
    expect(cells[6].displays).toHaveLength(1);
    expect(cells[8].stdout).toBe('after\n');
    expect(cells[8].displays).toHaveLength(1);
  });

  it('show() shows richly in the middle of a cell', () => {
    expect(cells[7].stdout).toBe('plain\n1\n');
    expect(cells[7].displays.map((d) => d['text/plain'].split('\n')[0])).toEqual([
      '0.71 +0.04 -0.03 Gyr',
      '0.71 +0.04 -0.03 Gyr',
      'Figure: two stars',
    ]);
  });
});

describe('elsewhere', () => {
  it('show() prints text', () => {
    const log = vi.spyOn(console, 'log').mockImplementation(() => {});
    const age = measured(1, 0.5, 1.5, 'Gyr');
    show(age, [age]);
    expect(log.mock.calls).toEqual([[age], [age]]);
    log.mockRestore();
    expect(inspect(age)).toBe('1.0 ± 0.5 Gyr');
  });

  it('a longer text nested in a record is cut to its first line', () => {
    const kernel = { display: vi.fn(), isLastExpression: () => false };
    setPresenter(presenterFor(kernel as never, { bring: vi.fn() }));
    const figure = new Figure([], {}, 'title');
    expect(inspect({ figure })).toBe('{ figure: Figure: title }');
    expect(inspect(figure)).toBe(figure.toString());
    expect(kernel.display).not.toHaveBeenCalled();
    setPresenter(null);
  });
});

describe('figureOutput', () => {
  it('names a figure by its content, and no text in it can end a script or a tag', () => {
    const hostile = '</script><script>alert(1)</script><!--"\'';
    const trace = { type: 'scatter', mode: 'markers', name: hostile, x: [1], y: [2] };
    const layout = { xaxis: { title: { text: hostile } }, yaxis: {} };
    const html = figureOutput(new Figure([trace], layout, hostile));
    expect(html).toBe(figureOutput(new Figure([trace], layout, hostile)));
    expect(html).not.toBe(figureOutput(new Figure([{ ...trace, x: [2] }], layout, hostile)));
    expect(html.match(/<\/script>/g)).toHaveLength(2);
    expect(html).not.toContain('<script>alert');
    expect(html).toContain(loaderKey());
    const data = JSON.parse(/<script type="application\/json">(.*?)<\/script>/.exec(html)?.[1] ?? '');
    expect(data.data[0].name).toBe(hostile);
  });
});
