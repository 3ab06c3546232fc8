import { createHash } from 'node:crypto';
import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { dirname, join } from 'node:path';
import { gzipSync } from 'node:zlib';
import type { CellRun, Kernel } from './kernel';
import { figurePage } from './page/figure-page';

/** Brings the loader of Plotly into the notebook when a figure needs it. */
export interface PlotlyCarrier {
  /** Emits the loader unless an output that is still there carries it. */
  bring(): void;
}

/**
 * Follows which cell's output carries the loader, so that a notebook holds Plotly once and not once a figure. The loader goes
 * with its cell: when that cell runs again or is deleted, the next figure brings it anew.
 */
export function createPlotlyCarrier(kernel: Pick<Kernel, 'display' | 'currentCell' | 'onCellStart'>): PlotlyCarrier {
  let carrier: CellRun | null = null;
  kernel.onCellStart((cell) => {
    if (carrier !== null && losesOutput(carrier, cell)) carrier = null;
  });
  return {
    bring() {
      if (carrier !== null) return;
      kernel.display({ 'text/html': plotlyLoader(), 'text/plain': '' });
      carrier = kernel.currentCell();
    },
  };
}

function losesOutput(carrier: CellRun, started: CellRun): boolean {
  if (carrier.cellId !== null && started.cellId !== null) {
    return carrier.cellId === started.cellId || started.deletedCells.includes(carrier.cellId);
  }
  return carrier.code === null || carrier.code === started.code;
}

const requireHere = createRequire(import.meta.url);
const cache: { key?: string; html?: string; version?: string } = {};

/** Version of Plotly that figures are drawn with. */
export function plotlyVersion(): string {
  cache.version ??= (
    JSON.parse(readFileSync(join(plotlyFolder(), 'package.json'), 'utf8')) as { version: string }
  ).version;
  return cache.version;
}

/** Name under which the loader stands on a page: changes with Plotly's version and with the code that draws. */
export function loaderKey(): string {
  if (cache.key === undefined) {
    const hash = createHash('sha256').update(figurePage.toString()).digest('hex').slice(0, 8);
    cache.key = `coeval-plotly-${plotlyVersion()}-${hash}`;
  }
  return cache.key;
}

/** Every loader in a piece of HTML, with its key. */
export const LOADER_PATTERN: RegExp =
  /<script type="text\/plain" data-plotly="(coeval-plotly-[\w.-]+)">[A-Za-z0-9+/=]*<\/script><script>[^<]*<\/script>/g;

/**
 * Plotly and the code that draws figures, as two scripts: 2 MB. Compressed when first needed (about 0.1 s), then kept. Run twice on
 * a page, the second does nothing.
 */
export function plotlyLoader(): string {
  if (cache.html !== undefined) return cache.html;
  const packed = gzipSync(readFileSync(join(plotlyFolder(), 'plotly.min.js'))).toString('base64');
  const start = `(${startPage.toString()})(${JSON.stringify(loaderKey())},${figurePage.toString()})`;
  cache.html =
    `<script type="text/plain" data-plotly="${loaderKey()}">${packed}</script>` +
    // No "<" may stand in it, so that it can be told from its surroundings and never ends early.
    `<script>new Function(atob("${Buffer.from(start, 'latin1').toString('base64')}"))()</script>`;
  return cache.html;
}

function plotlyFolder(): string {
  return dirname(requireHere.resolve('plotly.js-dist-min/plotly.min.js'));
}

/** Runs in the page, from its own text: unpacks Plotly once, and tells the figures that wait. */
function startPage(key: string, page: (plotly: unknown) => unknown): void {
  const shared = globalThis as unknown as Record<string, unknown>;
  if (shared[key]) return;
  const unpack = async () => {
    const packed = document.querySelector(`script[data-plotly="${key}"]`)?.textContent ?? '';
    const bytes = Uint8Array.from(atob(packed), (c) => c.charCodeAt(0));
    const stream = new Blob([bytes]).stream().pipeThrough(new DecompressionStream('gzip'));
    const code = await new Response(stream).text();
    // A Plotly of somebody else on the same page stays what it was.
    const other = shared['Plotly'];
    new Function('module', 'exports', 'define', code)();
    const plotly = shared['Plotly'];
    if (other) shared['Plotly'] = other;
    return page(plotly);
  };
  shared[key] = unpack();
  dispatchEvent(new Event(key));
}
