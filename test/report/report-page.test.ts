import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { createServer } from 'node:http';
import type { AddressInfo } from 'node:net';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { build } from '../../kernel-lib/commands/build.mjs';
import { executeNotebook } from '../../kernel-lib/commands/execute.mjs';
import { inRoot } from '../../kernel-lib/commands/paths.mjs';
import { Figure } from '../../kernel-lib/diagrams/figure';
import { figureOutput } from '../../kernel-lib/notebook/figure-output';
import { plotlyLoader } from '../../kernel-lib/notebook/plotly-loader';
import { exportReport } from '../../kernel-lib/report/export-report';
import { closeBrowser, figuresDrawn, fileAddress, openPage, takePicture } from '../browser/page';
import { allFigures } from '../diagrams/all-figures';
import { runPython } from '../kernel/run-cells';
import { code, html, notebook, printed, text } from './notebooks';

let folder: string;

beforeAll(() => {
  const results = inRoot('notebooks', 'results');
  mkdirSync(results, { recursive: true });
  folder = mkdtempSync(join(results, 'report-'));
});

afterAll(async () => {
  await closeBrowser();
  rmSync(folder, { recursive: true, force: true });
});

const report = async (name: string, book: object) => {
  const path = join(folder, `${name}.ipynb`);
  writeFileSync(path, JSON.stringify(book));
  return (await exportReport({ notebook: path })).path;
};

const many = (n: number) =>
  new Figure(
    [
      {
        type: 'scattergl',
        mode: 'markers',
        name: `${n}`,
        x: Array.from({ length: 6000 }, (_, i) => Math.sin(n * i)),
        y: Array.from({ length: 6000 }, (_, i) => Math.cos(3.3 * i)),
        marker: { size: 3, color: '#246ee5' },
      },
    ],
    { height: 500, xaxis: { title: { text: 'x' } }, yaxis: { title: { text: 'y' } } },
    `many points ${n}`,
  );

describe('a report in a browser', () => {
  it('draws every kind of figure, in light and dark, with no error and no request', async () => {
    const figures = Object.values(allFigures());
    const path = await report(
      'every',
      notebook(
        text('# Every figure\n\nFormula: $t = 10^{10}\\,M^{-2.5}$ yr.'),
        code('import', html(plotlyLoader()), printed('Result: 312 ± 9 members; age 0.71 +0.04 -0.03 Gyr (68 %)')),
        ...figures.map((figure) => code('figure', html(figureOutput(figure)))),
      ),
    );
    const inks: string[] = [];
    for (const dark of [false, true]) {
      const { page, watch } = await openPage({ dark });
      await page.goto(fileAddress(path));
      await figuresDrawn(page, figures.length);
      await takePicture(page, `report-${dark ? 'dark' : 'light'}`, { fullPage: true });
      expect(watch).toEqual({ errors: [], requests: [fileAddress(path)] });
      // The still picture has given way, and the drawing is as wide as the text.
      const places = await page.evaluate(() =>
        Array.from(document.querySelectorAll('[data-fig]'), (figure) => [
          (figure.querySelector('img') as HTMLElement).offsetHeight,
          figure.clientWidth - (figure.querySelector('.main-svg') as SVGElement).getBoundingClientRect().width,
        ]),
      );
      expect(places).toEqual(figures.map(() => [0, 0]));
      inks.push(await page.evaluate(() => getComputedStyle(document.querySelector('.xtick text') as Element).fill));
      await page.context().close();
    }
    expect(inks).toEqual(['rgb(29, 33, 39)', 'rgb(228, 231, 235)']);
  });

  it('runs temperature from hot at the left to cool at the right, luminosity upward', async () => {
    const { page } = await openPage();
    await page.goto(fileAddress(await report('hr', notebook(code('hr', html(figureOutput(allFigures()['hr'])))))));
    await figuresDrawn(page, 1);
    const labels = async (axis: string) =>
      page.evaluate((name) => {
        const at = (text: Element) => {
          const box = text.getBoundingClientRect();
          return [box.x + box.width / 2, box.y + box.height / 2, (text.textContent ?? '').replace(',', '')];
        };
        return Array.from(document.querySelectorAll(`.${name}tick text`), at) as [number, number, string][];
      }, axis);
    const x = (await labels('x')).filter(([, , label]) => /^\d+$/.test(label)).sort((a, b) => a[0] - b[0]);
    const y = (await labels('y')).filter(([, , label]) => /^[\d.]+$/.test(label)).sort((a, b) => b[1] - a[1]);
    const values = (ticks: [number, number, string][]) => ticks.map(([, , label]) => Number(label));
    expect(values(x).length).toBeGreaterThanOrEqual(3);
    expect(values(x)).toEqual([...values(x)].sort((a, b) => b - a));
    expect(values(y).length).toBeGreaterThanOrEqual(3);
    expect(values(y)).toEqual([...values(y)].sort((a, b) => a - b));
    await page.context().close();
  });

  it('follows a change from light to dark, and on paper shows the still pictures', async () => {
    const { page } = await openPage();
    await page.goto(fileAddress(await report('theme', notebook(code('hr', html(figureOutput(allFigures()['hr'])))))));
    await figuresDrawn(page, 1);
    const fill = () => page.evaluate(() => getComputedStyle(document.querySelector('.xtick text') as Element).fill);
    await page.emulateMedia({ colorScheme: 'dark' });
    await page.waitForFunction(
      () => getComputedStyle(document.querySelector('.xtick text') as Element).fill === 'rgb(228, 231, 235)',
    );
    await page.emulateMedia({ colorScheme: 'dark', media: 'print' });
    expect(await page.locator('[data-fig]>img').isVisible()).toBe(true);
    expect(await page.locator('[data-fig] .main-svg').first().isVisible()).toBe(false);
    expect(await page.evaluate(() => getComputedStyle(document.body).backgroundColor)).toBe('rgb(255, 255, 255)');
    await takePicture(page, 'report-print', { fullPage: true });
    expect((await page.pdf()).length).toBeGreaterThan(10_000);
    await page.emulateMedia({ colorScheme: 'light', media: 'screen' });
    await page.waitForFunction(
      () => getComputedStyle(document.querySelector('.xtick text') as Element).fill === 'rgb(29, 33, 39)',
    );
    expect(await fill()).toBe('rgb(29, 33, 39)');
    await page.context().close();
  });

  it('keeps at most four figures of many points alive, those in sight among them', async () => {
    const path = await report(
      'many',
      notebook(...[1, 2, 3, 4, 5, 6, 7].map((n) => code('m', html(figureOutput(many(n)))))),
    );
    const { page, watch } = await openPage();
    await page.goto(fileAddress(path));
    await figuresDrawn(page, 4);
    for (const place of [6, 3, 0, 5]) {
      const figure = page.locator('[data-fig]').nth(place);
      await figure.scrollIntoViewIfNeeded();
      await figure.locator('canvas').first().waitFor();
      await page.waitForFunction(() => document.querySelectorAll('[data-drawn]').length === 4);
    }
    expect(await page.locator('[data-fig]:not([data-drawn])>img').count()).toBe(3);
    expect(watch.errors).toEqual([]);
    await page.context().close();
  });

  it('stands without scripts: text, tables and still pictures', async () => {
    const { page } = await openPage();
    const path = await report('still', notebook(text('# Still'), code('hr', html(figureOutput(allFigures()['hr'])))));
    const context = await page.context().browser()?.newContext({ javaScriptEnabled: false });
    const still = await context?.newPage();
    await still?.goto(fileAddress(path));
    expect(await still?.locator('[data-fig]>img').isVisible()).toBe(true);
    expect(await still?.locator('h1').textContent()).toBe('Still');
    await context?.close();
    await page.context().close();
  });

  it('lets nothing out: pictures, frames, scripts, styles, calls and forms to other addresses', async () => {
    const asked: string[] = [];
    const server = createServer((request, reply) => {
      asked.push(request.url ?? '');
      reply.end();
    });
    await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
    const { port } = server.address() as AddressInfo;
    const away = `http://127.0.0.1:${port}/`;
    const attempts =
      `<img src="${away}i.png"><iframe src="${away}f"></iframe><link rel="stylesheet" href="${away}s.css">` +
      `<script src="${away}s.js"></script><style>@import "${away}c.css";p{background:url(${away}b.png)}</style><p>x</p>` +
      `<form id="f" action="${away}form"></form><script>fetch("${away}x").catch(()=>{});navigator.sendBeacon("${away}y");` +
      `try{new WebSocket("ws://127.0.0.1:${port}/w")}catch{};document.getElementById("f").submit();` +
      'globalThis.tried=true</script>';
    try {
      const path = await report('out', notebook(code('x', html(attempts))));
      const { page, watch } = await openPage();
      await page.goto(fileAddress(path), { waitUntil: 'commit' });
      await page.waitForFunction(() => (globalThis as { tried?: boolean }).tried);
      await page.waitForTimeout(500);
      expect(asked).toEqual([]);
      expect(watch.errors.length).toBeGreaterThan(6);
      expect(page.url()).toBe(fileAddress(path));
      await page.context().close();
      // The same without the policy does ask, so the server would have heard.
      const open = join(folder, 'open.html');
      writeFileSync(open, attempts.replace('document.getElementById("f").submit();', ''));
      const unguarded = (await openPage()).page;
      await unguarded.goto(fileAddress(open), { waitUntil: 'commit' });
      await unguarded.waitForFunction(() => (globalThis as { tried?: boolean }).tried);
      await expect.poll(() => asked.length).toBeGreaterThan(5);
      await unguarded.context().close();
    } finally {
      server.closeAllConnections();
      server.close();
    }
  });
});

describe('an executed notebook', () => {
  const name = 'executed.ipynb';
  const figure = (title: string) =>
    `new Figure([{ type: 'scatter', mode: 'markers', x: [1, 2], y: [3, 4] }], { height: 300, xaxis: {}, yaxis: {} }, '${title}')`;

  beforeAll(async () => {
    await build();
    const kernelspec = { name: 'tslab', display_name: 'TypeScript (tslab)', language: 'typescript' };
    const cells = ["import { Figure, measured } from 'coeval';", figure('one'), figure('two'), figure('three')];
    const book = notebook(
      text('# Executed'),
      ...[...cells, "console.log('Result: 3 members')"].map((source) => ({ ...code(source), execution_count: null })),
    );
    const path = join(folder, name);
    writeFileSync(path, JSON.stringify({ ...book, metadata: { kernelspec }, cells: book.cells.map(withId) }));
    const progress = { update() {}, line() {}, end() {} };
    await executeNotebook(path, path, { progress, isTerminal: false });
  });

  it('becomes a report with three figures, its numbers and its time', async () => {
    const { path } = await exportReport({ notebook: join(folder, name) });
    const { page, watch } = await openPage();
    await page.goto(fileAddress(path));
    await figuresDrawn(page, 3);
    expect(watch).toEqual({ errors: [], requests: [fileAddress(path)] });
    expect(await page.locator('summary').allInnerTexts()).toEqual([1, 2, 3, 4, 5].map((n) => `Code [${n}]`));
    expect(await page.locator('.result li').allInnerTexts()).toEqual(['3 members']);
    expect(await page.locator('.facts').textContent()).toMatch(/^Run 20\d\d-\d\d-\d\d \d\d:\d\d UTC/);
    expect(await page.locator('script[data-plotly]').count()).toBe(1);
    await page.context().close();
  });

  it('exported by nbconvert draws its figures too, with the network cut', async () => {
    await runPython(inRoot('test', 'kernel', 'to_html.py'), [join(folder, name), join(folder, 'nbconvert.html')]);
    const { page } = await openPage();
    await page.route(/^(?!file:|data:|blob:)/, (route) => route.abort());
    await page.goto(fileAddress(join(folder, 'nbconvert.html')));
    await figuresDrawn(page, 3);
    const prompts = await page.locator('.jp-InputPrompt').allInnerTexts();
    expect(prompts.map((prompt) => prompt.replace(/\s+/g, ' ').trim()).filter((prompt) => prompt !== '')).toEqual(
      [1, 2, 3, 4, 5].map((n) => `In [${n}]:`),
    );
    await takePicture(page, 'nbconvert');
    await page.context().close();
  });
});

let ids = 0;

const withId = (cell: object) => ({ id: `made-${++ids}`, metadata: {}, ...cell });
