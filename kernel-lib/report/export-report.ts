import { readFileSync } from 'node:fs';
import { mkdir, open, readFile, rename, rm, stat, writeFile } from 'node:fs/promises';
import { createRequire } from 'node:module';
import { basename, dirname, extname, isAbsolute, join, relative, resolve } from 'node:path';
import { loaderKey, plotlyLoader, plotlyVersion } from '../notebook/plotly-loader';
import { checkOptions } from '../quantity/options';
import { escapeHtml, presentable } from '../quantity/present';
import { parseNotebook } from './notebook-json';
import { REPORT_MARK, reportHtml } from './report-html';

/** Options of `exportReport`. */
export interface ExportReportOptions {
  /** Path of an executed notebook (.ipynb). */
  readonly notebook: string;
  /** Path of the report. Default: beside the notebook, its name with .html. Its folder is made if need be. */
  readonly output?: string;
  /** Default: the notebook's first heading. */
  readonly title?: string;
  /** Whether a file that is not an earlier report may be replaced. Default false. */
  readonly overwrite?: boolean;
}

/** A report that was written. */
export interface WrittenReport {
  /** Full path of the file. */
  readonly path: string;
  /** Its size in bytes. */
  readonly bytes: number;
}

/**
 * Writes one HTML file from an executed notebook, for readers without Jupyter: results first, code folded, figures live, and no
 * request to any server. An earlier report of the same name is renewed; any other file is left alone.
 * @throws Error when the notebook cannot be read or was never run, or when a file stands in the way; TypeError for an unknown option
 * @example await exportReport({ notebook: '01-from-field-to-age.ipynb', title: 'Age of Ostrava 3' })
 */
export async function exportReport(options: ExportReportOptions): Promise<WrittenReport> {
  const caller = 'exportReport';
  checkOptions(caller, options, ['notebook', 'output', 'title', 'overwrite']);
  if (typeof options?.notebook !== 'string') {
    throw new TypeError(`${caller}: pass the path of a notebook, such as { notebook: 'analysis.ipynb' }.`);
  }
  const path = resolve(options.notebook);
  const output = resolve(options.output ?? path.replace(/\.ipynb$/, '') + '.html');
  const { title, overwrite = false } = options;
  const notebook = parseNotebook(caller, path, await readText(caller, path));
  if (!notebook.cells.some((cell) => (cell.outputs ?? []).length > 0)) {
    throw new Error(`${caller}: ${path} has no outputs. Run it, save it, then make the report.`);
  }
  if (!overwrite) await refuseStranger(caller, output);
  const html = reportHtml(notebook, {
    ...(title === undefined ? {} : { title }),
    when: (await stat(path)).mtime.toISOString(),
    versions: { Coeval: libraryVersion(), Plotly: plotlyVersion(), Node: process.versions.node },
    source: basename(path),
    picture: (address) => pictureBeside(path, address),
    loader: { key: loaderKey(), html: plotlyLoader() },
  });
  await writeWhole(caller, output, html);
  const report = { path: output, bytes: Buffer.byteLength(html) };
  const text = `Report: ${output} (${(report.bytes / 1e6).toFixed(1)} MB)`;
  return presentable(report, { text: () => text, html: () => `<div>${escapeHtml(text)}</div>` });
}

async function readText(caller: string, path: string): Promise<string> {
  try {
    return await readFile(path, 'utf8');
  } catch (error) {
    const { code, message } = error as NodeJS.ErrnoException;
    throw new Error(
      code === 'ENOENT' ? `${caller}: there is no file ${path}.` : `${caller}: ${path} cannot be read (${message}).`,
    );
  }
}

async function refuseStranger(caller: string, path: string): Promise<void> {
  const file = await open(path, 'r').catch(() => null);
  if (file === null) return;
  try {
    const { buffer, bytesRead } = await file.read(Buffer.alloc(REPORT_MARK.length), 0, REPORT_MARK.length, 0);
    if (buffer.toString('latin1', 0, bytesRead) === REPORT_MARK) return;
  } finally {
    await file.close();
  }
  throw new Error(
    `${caller}: ${path} exists and is not an earlier report. Choose another output, or pass overwrite: true.`,
  );
}

/** Written beside first, so that no half report is ever there. */
async function writeWhole(caller: string, path: string, text: string): Promise<void> {
  const beside = `${path}.${process.pid}.tmp`;
  try {
    await mkdir(dirname(path), { recursive: true });
    await writeFile(beside, text);
    await rename(beside, path);
  } catch (error) {
    await rm(beside, { force: true });
    throw new Error(`${caller}: ${path} cannot be written (${(error as Error).message}).`);
  }
}

const PICTURE_TYPES: Readonly<Record<string, string>> = {
  '.png': 'image/png',
  '.jpg': 'image/jpeg',
  '.jpeg': 'image/jpeg',
  '.gif': 'image/gif',
  '.webp': 'image/webp',
  '.svg': 'image/svg+xml',
};

/** A picture of the notebook's folder or below, as a data URI. */
function pictureBeside(notebook: string, address: string): string | null {
  const type = PICTURE_TYPES[extname(address).toLowerCase()];
  if (type === undefined || /^[a-z]+:/i.test(address)) return null;
  const folder = dirname(notebook);
  const path = join(folder, decodeURI(address));
  const inside = relative(folder, path);
  if (inside.startsWith('..') || isAbsolute(inside)) return null;
  try {
    return `data:${type};base64,${readFileSync(path).toString('base64')}`;
  } catch {
    return null;
  }
}

/** Version of the library: from package.json, which lies above both the sources' rooms and the built file. */
function libraryVersion(): string {
  const { version } = createRequire(import.meta.url)('../package.json') as { version: string };
  return version;
}
