import { LOADER_PATTERN } from '../notebook/plotly-loader';
import { checkOptions, describe } from '../quantity/options';
import { escapeHtml } from '../quantity/present';
import { isError, outputHtml } from './cell-output';
import { type MarkdownContext, markdownHtml } from './markdown';
import { executedAt, joined, type NotebookCell, type NotebookJson, resultLine } from './notebook-json';
import { PAGE_STYLE } from './page-style';

/** Options of `reportHtml`. */
export interface ReportHtmlOptions {
  /** Default: the title in the notebook's metadata, else its first heading, else `Report`. */
  readonly title?: string;
  /** When the notebook was run, ISO 8601, where the notebook itself does not say. */
  readonly when?: string;
  /** Name and version of what made the results. */
  readonly versions?: Readonly<Record<string, string>>;
  /** Name of the notebook's file. */
  readonly source?: string;
  /** Address of a picture named in a text, as a data URI; null when it cannot be read. */
  readonly picture?: (address: string) => string | null;
  /** Loader of Plotly by its key, for a notebook whose own copy was lost. */
  readonly loader?: { readonly key: string; readonly html: string };
}

const OPTIONS = ['title', 'when', 'versions', 'source', 'picture', 'loader'];

/** First words of every report, by which one is known. */
export const REPORT_MARK =
  '<!DOCTYPE html><html lang="en"><head><meta charset="utf-8"><meta name="generator" content="Coeval">';

// Everything is in the page; nothing may be fetched. Plotly draws many points with code it makes, hence 'unsafe-eval'.
const POLICY =
  "default-src 'none'; script-src 'unsafe-inline' 'unsafe-eval'; style-src 'unsafe-inline'; img-src data: blob:; " +
  "font-src data:; media-src data:; base-uri 'none'; form-action 'none'";

/**
 * An executed notebook as one HTML page that needs no network: result and circumstances first, texts, outputs in their best form,
 * code folded, Plotly once.
 * @param notebook a parsed notebook of format 4
 * @param options  see ReportHtmlOptions
 * @throws TypeError for an unknown option, a date that is none, or something that is no notebook
 * @example reportHtml(JSON.parse(text), { title: 'Age of Ostrava 3' })
 */
export function reportHtml(notebook: NotebookJson, options: ReportHtmlOptions = {}): string {
  checkOptions('reportHtml', options, OPTIONS);
  if (!Array.isArray(notebook?.cells)) {
    throw new TypeError(
      'reportHtml: the first argument must be a notebook of format 4, parsed from its JSON: it has no cells.',
    );
  }
  if (options.when !== undefined && Number.isNaN(Date.parse(options.when))) {
    throw new TypeError(`reportHtml: when is ${describe(options.when)}; write a date such as "2026-03-01T12:00:00Z".`);
  }
  const title = options.title ?? titleOf(notebook) ?? 'Report';
  const loaders = new Map<string, string>();
  const contents: Heading[] = [];
  const body = notebook.cells
    .map((cell, i) => cellHtml(withoutTitle(cell, i, title), options, loaders, contents))
    .join('');
  // A figure whose loader went with a deleted output is drawn all the same, if it was made for this one.
  const { loader } = options;
  if (loader && body.includes(loader.key)) loaders.set(loader.key, loader.html);
  return [
    REPORT_MARK,
    `<meta http-equiv="Content-Security-Policy" content="${POLICY}">`,
    '<meta name="viewport" content="width=device-width,initial-scale=1">',
    `<title>${escapeHtml(title)}</title><style>${PAGE_STYLE}</style></head><body>`,
    `<header><h1>${escapeHtml(title)}</h1>${resultHtml(notebook)}${failureHtml(notebook)}${factsHtml(notebook, options)}`,
    `${contentsHtml(contents)}</header><main>${body}</main>`,
    footerHtml(options),
    ...loaders.values(),
    '</body></html>\n',
  ].join('\n');
}

interface Heading {
  readonly level: number;
  readonly text: string;
  readonly id: string;
}

const FIRST_HEADING = /^\s*#\s+(.+?)\s*#*\s*(?:\n|$)/;

function titleOf(notebook: NotebookJson): string | null {
  const { title } = notebook.metadata ?? {};
  if (typeof title === 'string' && title.trim() !== '') return title;
  const first = notebook.cells.find((cell) => cell.cell_type === 'markdown');
  const heading = first && FIRST_HEADING.exec(joined(first.source));
  return heading ? heading[1].replace(/[*_`]/g, '') : null;
}

/** The first heading is not repeated beneath a title that says the same. */
function withoutTitle(cell: NotebookCell, index: number, title: string): NotebookCell {
  if (index !== 0 || cell.cell_type !== 'markdown') return cell;
  const source = joined(cell.source);
  const heading = FIRST_HEADING.exec(source);
  const same = heading !== null && heading[1].replace(/[*_`]/g, '') === title;
  return same ? { ...cell, source: source.slice(heading[0].length) } : cell;
}

function cellHtml(
  cell: NotebookCell,
  options: ReportHtmlOptions,
  loaders: Map<string, string>,
  contents: Heading[],
): string {
  const context: MarkdownContext = {
    picture: (address) => attachment(cell, address) ?? dataUri(address) ?? options.picture?.(address) ?? null,
    heading: (level, text) => {
      const id = `section-${contents.length + 1}`;
      contents.push({ level, text, id });
      return id;
    },
  };
  const source = joined(cell.source);
  if (cell.cell_type === 'markdown') return `<section>${markdownHtml(source, context)}</section>\n`;
  if (cell.cell_type !== 'code' || source.trim() === '') return '';
  const html = (text: string) =>
    text.replace(LOADER_PATTERN, (all, key: string) => {
      loaders.set(key, all);
      return '';
    });
  const markdown = (text: string) => markdownHtml(text, context);
  const outputs = (cell.outputs ?? []).map((output) => outputHtml(output, { markdown, html })).join('');
  const count = cell.execution_count == null ? '' : ` [${cell.execution_count}]`;
  return (
    `<section><details class="code"><summary>Code${count}</summary><pre><code>${escapeHtml(source)}</code></pre></details>` +
    `${outputs}</section>\n`
  );
}

function attachment(cell: NotebookCell, address: string): string | null {
  if (!address.startsWith('attachment:')) return null;
  const forms = cell.attachments?.[decodeURIComponent(address.slice('attachment:'.length))] ?? {};
  const [type, bytes] = Object.entries(forms).find(([name]) => name.startsWith('image/')) ?? [];
  return type === undefined ? null : `data:${type};base64,${joined(bytes).replace(/\s/g, '')}`;
}

const dataUri = (address: string) => (address.startsWith('data:image/') ? address : null);

/** The result line has parts between semicolons and ends with a remark in brackets: a list and a note. */
function resultHtml(notebook: NotebookJson): string {
  const line = resultLine(notebook);
  if (line === null) return '';
  const [, values, note] = /^(.*?)(?:\s*\(([^()]*)\))?\s*$/.exec(line) as RegExpExecArray;
  const items = values.split(';').map((part) => `<li>${escapeHtml(part.trim())}</li>`);
  const remark = note === undefined ? '' : `<p>${escapeHtml(note[0].toUpperCase() + note.slice(1))}.</p>`;
  return `<div class="result"><h2>Result</h2><ul>${items.join('')}</ul>${remark}</div>`;
}

function failureHtml(notebook: NotebookJson): string {
  const code = notebook.cells.filter((cell) => cell.cell_type === 'code');
  const failed = code.findIndex((cell) => (cell.outputs ?? []).some(isError));
  if (failed < 0) return '';
  return `<p class="failed">Code cell ${failed + 1} of ${code.length} ended with an error; what follows may be missing or old.</p>`;
}

function factsHtml(notebook: NotebookJson, options: ReportHtmlOptions): string {
  const when = executedAt(notebook) ?? options.when;
  const versions = Object.entries(options.versions ?? {}).map(([name, version]) => `${name} ${version}`);
  const facts = [
    ...(when === undefined ? [] : [`Run ${new Date(when).toISOString().slice(0, 16).replace('T', ' ')} UTC`]),
    ...(options.source === undefined ? [] : [`notebook ${options.source}`]),
    ...versions,
  ];
  return facts.length === 0 ? '' : `<p class="facts">${facts.map(escapeHtml).join(' &middot; ')}</p>`;
}

function contentsHtml(headings: readonly Heading[]): string {
  const top = headings.filter((heading) => heading.level === 2);
  if (top.length < 3) return '';
  const items = top.map(({ id, text }) => `<li><a href="#${id}">${escapeHtml(text)}</a></li>`);
  return `<nav aria-label="Contents"><ol>${items.join('')}</ol></nav>`;
}

function footerHtml(options: ReportHtmlOptions): string {
  const source = options.source === undefined ? 'a notebook' : `the notebook ${options.source}`;
  return `<footer>Made from ${escapeHtml(source)}. Everything is in this file; it needs no network. Code is folded: press “Code” to read it.</footer>`;
}
