import type { Presentation } from '../quantity/present';
import { escapeHtml, htmlTable, textTable } from '../quantity/present';
import type { Catalogue } from './catalogue';
import { type ColumnSummary, summariseColumn } from './column-summary';
import { type ColumnInfo, columnValueText, shortNumber } from './columns';
import { historyText } from './history';

/** Most columns and warnings that are shown; the rest are counted. */
const SHOWN_COLUMNS = 100;
const SHOWN_WARNINGS = 12;
const PREVIEW_ROWS = 5;
const PREVIEW_COLUMNS = 20;

/** How a catalogue shows itself. Nothing is computed before it is shown. */
export function presentCatalogue(catalogue: Catalogue): Presentation {
  return { text: () => catalogueText(catalogue), html: () => catalogueHtml(catalogue) };
}

function catalogueText(catalogue: Catalogue): string {
  const rows = lines(catalogue).map(({ info, role, summary }) => [
    clipped(info.name),
    role,
    info.unit,
    rangeText(info, summary),
    info.missing === 0 ? '' : info.missing,
    sparkline(summary.counts),
  ]);
  return [
    titleOf(catalogue),
    ...warningsOf(catalogue).map((w) => `! ${w}`),
    textTable(['column', 'role', 'unit', 'middle 98 %', 'missing', 'histogram'], rows),
    ...hiddenColumns(catalogue),
    ...(catalogue.history.length > 0 ? ['history', historyText(catalogue.history)] : []),
  ].join('\n');
}

function catalogueHtml(catalogue: Catalogue): string {
  const cell = (html: string, right = false) =>
    `<td style="text-align:${right ? 'right' : 'left'};padding:2px 10px">${html}</td>`;
  const body = lines(catalogue).map(({ info, role, summary }) => {
    const name = escapeHtml(clipped(info.name));
    const about =
      info.description === '' ? name : `<span title="${escapeHtml(clipped(info.description, 300))}">${name}</span>`;
    return `<tr>${cell(about)}${cell(escapeHtml(role))}${cell(escapeHtml(info.unit))}${cell(escapeHtml(rangeText(info, summary)), true)}${cell(escapeHtml(extremesText(info, summary)), true)}${cell(info.missing === 0 ? '' : String(info.missing), true)}${cell(histogramImage(info.name, summary))}</tr>`;
  });
  const head = ['column', 'role', 'unit', 'middle 98 %', 'smallest to largest', 'missing', ''];
  const headHtml = head.map((h) => `<th style="text-align:left;padding:2px 10px">${h}</th>`).join('');
  const warnings = warningsOf(catalogue);
  return [
    '<div>',
    `<p><b>${escapeHtml(catalogue.source)}</b>: ${escapeHtml(titleOf(catalogue).slice(catalogue.source.length + 2))}</p>`,
    warnings.length === 0 ? '' : `<ul>${warnings.map((w) => `<li>${escapeHtml(w)}</li>`).join('')}</ul>`,
    `<table><thead><tr>${headHtml}</tr></thead><tbody>${body.join('')}</tbody></table>`,
    ...hiddenColumns(catalogue).map((t) => `<p>${escapeHtml(t)}</p>`),
    preview(catalogue),
    catalogue.history.length === 0
      ? ''
      : `<details><summary>history</summary><pre>${escapeHtml(historyText(catalogue.history))}</pre></details>`,
    '</div>',
  ].join('');
}

interface Line {
  readonly info: ColumnInfo;
  readonly role: string;
  readonly summary: ColumnSummary;
}

function lines(catalogue: Catalogue): Line[] {
  const roleOf = new Map(Object.entries(catalogue.roles).map(([role, name]) => [name, role]));
  return catalogue.columns.slice(0, SHOWN_COLUMNS).map((info) => ({
    info,
    role: roleOf.get(info.name) ?? '',
    summary: summariseColumn(catalogue.values(info.name)),
  }));
}

function titleOf(catalogue: Catalogue): string {
  const { rowCount, columns } = catalogue;
  return `${catalogue.source}: ${rowCount} ${rowCount === 1 ? 'row' : 'rows'}, ${columns.length} ${columns.length === 1 ? 'column' : 'columns'}`;
}

function warningsOf(catalogue: Catalogue): string[] {
  const { warnings } = catalogue;
  if (warnings.length <= SHOWN_WARNINGS) return [...warnings];
  return [...warnings.slice(0, SHOWN_WARNINGS), `and ${warnings.length - SHOWN_WARNINGS} more in .warnings`];
}

function hiddenColumns(catalogue: Catalogue): string[] {
  const hidden = catalogue.columns.length - SHOWN_COLUMNS;
  return hidden > 0 ? [`and ${hidden} more columns in .columns`] : [];
}

function rangeText(info: ColumnInfo, summary: ColumnSummary): string {
  if (info.kind === 'number') {
    if (Number.isNaN(summary.low)) return 'no value';
    return summary.low === summary.high
      ? shortNumber(summary.low)
      : `${shortNumber(summary.low)} to ${shortNumber(summary.high)}`;
  }
  const { words } = summary;
  if (words.length === 0) return 'no value';
  const first = words.slice(0, 3).map(([word]) => clipped(word, 24));
  return `${first.join(', ')}${words.length > 3 ? ', ...' : ''}`;
}

function extremesText(info: ColumnInfo, summary: ColumnSummary): string {
  return info.kind === 'number' && !Number.isNaN(summary.min)
    ? `${shortNumber(summary.min)} to ${shortNumber(summary.max)}`
    : '';
}

const BLOCKS = '▁▂▃▄▅▆▇█';

/** A histogram of block characters; bins in pairs, an empty bin is a blank. */
function sparkline(counts: readonly number[]): string {
  const pairs = counts.flatMap((c, k) => (k % 2 === 0 ? [c + (counts[k + 1] ?? 0)] : []));
  const most = Math.max(...pairs, 1);
  return pairs.map((c) => (c === 0 ? ' ' : BLOCKS[Math.min(7, Math.floor((c / most) * 8))])).join('');
}

/** The histogram as an image of its own: pages that strip drawings keep images. */
function histogramImage(name: string, summary: ColumnSummary): string {
  const { counts, low, high } = summary;
  if (counts.length === 0) return '';
  const most = Math.max(...counts);
  const steps = counts.map((c) => `V${(20 - (19 * c) / most).toFixed(1)}h4`).join('');
  const svg = `<svg xmlns="http://www.w3.org/2000/svg" width="${4 * counts.length}" height="20"><path fill="#5b8db8" d="M0 20${steps}V20z"/></svg>`;
  const alt = `histogram of ${clipped(name)} from ${shortNumber(low)} to ${shortNumber(high)}`;
  return `<img alt="${escapeHtml(alt)}" width="${4 * counts.length}" height="20" src="data:image/svg+xml;base64,${btoa(svg)}">`;
}

function preview(catalogue: Catalogue): string {
  const shown = catalogue.columns.slice(0, PREVIEW_COLUMNS);
  const count = Math.min(PREVIEW_ROWS, catalogue.rowCount);
  if (count === 0) return '';
  const columns = shown.map((c) => catalogue.values(c.name));
  const rows = Array.from({ length: count }, (_, i) => columns.map((values) => clipped(columnValueText(values[i]))));
  const numeric = shown.flatMap((c, j) => (c.kind === 'number' ? [j] : []));
  const table = htmlTable(
    shown.map((c) => clipped(c.name)),
    rows,
    { numeric },
  );
  return `<details><summary>first ${count === 1 ? 'row' : `${count} rows`}</summary>${table}</details>`;
}

function clipped(text: string, most = 40): string {
  const line = text.replace(/[\r\n]+/g, ' ');
  return line.length > most ? `${line.slice(0, most - 3)}...` : line;
}
