import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { joined } from '../../kernel-lib/report/notebook-json';
import { type Lab, labCommand, notebookReady, runAll, runCell, startLab } from '../browser/jupyter-lab';
import { closeBrowser, figuresDrawn, takePicture } from '../browser/page';

const figure = (title: string, mode = 'markers') =>
  `new Figure([{ type: 'scatter', mode: '${mode}', name: '${title}', x: [1, 2, 3], y: [1, 4, 9] }],
    { height: 240, margin: { t: 20 }, xaxis: { title: { text: 'x' } }, yaxis: { title: { text: 'y' } } }, '${title}')`;

const CELLS = [
  "import { Figure, measured, progress } from 'coeval'; measured(0.71, 0.68, 0.75, 'Gyr')",
  figure('squares'),
  figure('joined', 'lines'),
  "const report = progress('Walk'); for (let i = 0; i <= 20; i++) { report(i, 20); await new Promise((r) => setTimeout(r, 20)); }",
  `[${figure('a')}, ${figure('b')}]`,
];

let lab: Lab;

beforeAll(async () => {
  lab = await startLab();
});

afterAll(async () => {
  await closeBrowser();
  await lab.close();
});

/** Loaders and figures in the outputs of a saved notebook. */
function carried(name: string): { loaders: number; figures: number } {
  const outputs = lab.read(name).cells.flatMap((cell) => cell.outputs ?? []);
  const html = outputs.map((output) => joined(output.data?.['text/html'])).join('');
  return { loaders: html.split(' data-plotly=').length - 1, figures: html.split('<div data-fig=').length - 1 };
}

describe('in JupyterLab', () => {
  it('figures are drawn, in light and dark, without an outside request, and results show themselves', async () => {
    lab.write('figures.ipynb', CELLS);
    const { page, watch } = await lab.open('figures.ipynb', { height: 1500 });
    await runAll(page);
    await figuresDrawn(page, 4);
    await takePicture(page, 'jupyterlab-light');
    expect(await page.locator('.jp-OutputArea-output').filter({ hasText: '0.71 +0.04 -0.03 Gyr' }).count()).toBe(1);
    expect(await page.locator('.jp-OutputArea-output progress').count()).toBe(1);
    expect(await page.locator('.jp-OutputArea-output').filter({ hasText: 'Walk: 20 of 20' }).count()).toBe(1);
    const prompts = await page.locator('.jp-CodeCell .jp-InputPrompt').allInnerTexts();
    expect(prompts.map((text) => text.trim())).toEqual(CELLS.map((_, i) => `[${i + 1}]:`));

    const ink = () => page.evaluate(() => getComputedStyle(document.querySelector('.xtick text') as Element).fill);
    const light = await ink();
    await labCommand(page, 'apputils:change-theme', { theme: 'JupyterLab Dark' });
    await page.waitForFunction(
      (before) => getComputedStyle(document.querySelector('.xtick text') as Element).fill !== before,
      light,
    );
    await page.locator('#jupyterlab-splash').waitFor({ state: 'detached' });
    await takePicture(page, 'jupyterlab-dark');
    // Nearly black on white, then nearly white on black.
    expect(light).toMatch(/^rgba?\((\d|[1-4]\d),/);
    expect(await ink()).toMatch(/^rgba?\(2[0-5]\d,/);
    await labCommand(page, 'apputils:change-theme', { theme: 'JupyterLab Light' });

    expect(watch.errors).toEqual([]);
    expect(watch.requests.filter((address) => !address.startsWith(lab.address))).toEqual([]);
    await labCommand(page, 'docmanager:save');
    expect(carried('figures.ipynb')).toEqual({ loaders: 1, figures: 4 });
    await page.context().close();
  });

  it('a notebook opened again draws its figures without a kernel having run', async () => {
    const { page, watch } = await lab.open('figures.ipynb', { height: 1500 });
    await figuresDrawn(page, 4);
    expect(watch.errors).toEqual([]);
    await page.context().close();
  });

  it('the loader stays in the notebook when the cell that carried it runs again, and when it is deleted', async () => {
    lab.write('again.ipynb', [CELLS[0], figure('squares'), figure('joined', 'lines'), figure('c')]);
    const { page } = await lab.open('again.ipynb', { height: 1500 });
    await runAll(page);
    await figuresDrawn(page, 3);
    await runCell(page, 1);
    await figuresDrawn(page, 3);
    await labCommand(page, 'docmanager:save');
    expect(carried('again.ipynb')).toEqual({ loaders: 1, figures: 3 });

    await labCommand(page, 'notebook:delete-cell');
    await runCell(page, 2);
    await labCommand(page, 'docmanager:save');
    expect(carried('again.ipynb')).toEqual({ loaders: 1, figures: 2 });
    await page.reload();
    await notebookReady(page);
    await figuresDrawn(page, 2);
    await page.context().close();
  });

  it('a figure follows the width of its place', async () => {
    const { page } = await lab.open('figures.ipynb', { height: 1500 });
    await figuresDrawn(page, 4);
    const widths = () =>
      page.evaluate(() =>
        Array.from(document.querySelectorAll('[data-fig]'), (f) => [
          f.clientWidth,
          (f.querySelector('.main-svg') as SVGElement).getBoundingClientRect().width,
        ]),
      );
    const wide = await widths();
    await page.setViewportSize({ width: 900, height: 1500 });
    await page.waitForFunction((before) => {
      const svg = document.querySelector('[data-fig] .main-svg');
      return svg !== null && svg.getBoundingClientRect().width < before - 100;
    }, wide[0][1]);
    await takePicture(page, 'jupyterlab-narrow');
    for (const [place, picture] of await widths()) expect(Math.abs(place - picture)).toBeLessThan(2);
    await page.context().close();
  });

  it('where a notebook is not trusted the still pictures stand', async () => {
    const outputs = lab.read('figures.ipynb').cells;
    // Changed by another hand, so the signature no longer holds.
    lab.writeRaw('foreign.ipynb', {
      ...lab.read('figures.ipynb'),
      cells: outputs.map((cell) => ({ ...cell, outputs: [...(cell.outputs ?? []), ...foreignText] })),
    });
    const { page, watch } = await lab.open('foreign.ipynb', { height: 1500 });
    await page.locator('.jp-OutputArea-output img[src^="data:image/svg+xml"]').nth(3).waitFor();
    expect(await page.locator('.main-svg').count()).toBe(0);
    const widths = await page
      .locator('.jp-OutputArea-output img')
      .evaluateAll((images) => images.map((image) => (image as HTMLImageElement).naturalWidth));
    expect(widths.filter((width) => width > 300)).toHaveLength(4);
    await takePicture(page, 'jupyterlab-untrusted');
    expect(watch.errors).toEqual([]);
    await page.context().close();
  });
});

const foreignText = [{ output_type: 'stream', name: 'stdout', text: 'added\n' }];
