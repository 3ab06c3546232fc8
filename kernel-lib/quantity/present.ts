/**
 * How a result shows itself. Rooms that must run in a browser cannot touch the kernel, so a result only says what it
 * looks like as text and as HTML; the notebook room, when loaded, sets a presenter that turns that into a cell output.
 */
export interface Presentation {
  /** Tidy plain text, for a terminal and for `text/plain`. */
  text(): string;
  /** Self-contained HTML (no outside request), every value from data escaped. */
  html(): string;
}

/** Key under which a result holds its Presentation. */
export const PRESENT: unique symbol = Symbol.for('coeval.present');

const INSPECT: unique symbol = Symbol.for('nodejs.util.inspect.custom') as never;
const PRESENTER: unique symbol = Symbol.for('coeval.presenter') as never;

/** What the notebook room installs: given a shown object, emits a rich output and returns what the console prints. */
export interface Presenter {
  (shown: object, presentation: Presentation): string;
  /** What an object inside another one prints; without it, its text. */
  nested?(shown: object, presentation: Presentation): string;
}

/** Sets (or with null removes) the presenter. Kept on globalThis so that two copies of the library share one. */
export function setPresenter(presenter: Presenter | null): void {
  (globalThis as Record<symbol, unknown>)[PRESENTER] = presenter;
}

/**
 * Gives an object a presentation, without adding visible keys, and freezes it.
 * @returns the same object
 */
export function presentable<T extends object>(target: T, presentation: Presentation): T {
  attachPresentation(target, presentation);
  return Object.freeze(target);
}

/** As `presentable`, for a class instance that freezes itself. */
export function attachPresentation(target: object, presentation: Presentation): void {
  Object.defineProperty(target, PRESENT, { value: presentation, enumerable: false });
  Object.defineProperty(target, INSPECT, {
    enumerable: false,
    value(depth: number, options: { depth: number | null }): string {
      // A depth below the starting one means that the object sits inside another one: no rich output of its own then.
      const nested = options != null && options.depth != null && depth < options.depth;
      const presenter = (globalThis as Record<symbol, unknown>)[PRESENTER] as Presenter | null | undefined;
      if (nested) return presenter?.nested?.(target, presentation) ?? presentation.text();
      return presenter == null ? presentation.text() : presenter(target, presentation);
    },
  });
  if (!Object.hasOwn(target, 'toString')) {
    Object.defineProperty(target, 'toString', { enumerable: false, value: () => presentation.text() });
  }
}

/** The presentation of a value that has one, else null. */
export function presentationOf(value: unknown): Presentation | null {
  if (value === null || typeof value !== 'object') return null;
  return ((value as Record<symbol, unknown>)[PRESENT] as Presentation | undefined) ?? null;
}

const ENTITIES: Record<string, string> = { '&': '&amp;', '<': '&lt;', '>': '&gt;', '"': '&quot;', "'": '&#39;' };

/** Text made safe inside HTML elements and quoted attributes. */
export function escapeHtml(text: unknown): string {
  return String(text).replace(/[&<>"']/g, (c) => ENTITIES[c]);
}

/**
 * A small HTML table.
 * @param head  column titles
 * @param rows  cells as plain text; they are escaped here
 * @param options caption, and which columns hold numbers (aligned right)
 */
export function htmlTable(
  head: readonly string[],
  rows: readonly (readonly unknown[])[],
  options: { caption?: string; numeric?: readonly number[] } = {},
): string {
  const numeric = new Set(options.numeric ?? []);
  const cell = (tag: string, value: unknown, j: number) =>
    `<${tag} style="text-align:${numeric.has(j) ? 'right' : 'left'};padding:2px 10px">${escapeHtml(value)}</${tag}>`;
  const line = (tag: string, cells: readonly unknown[]) => `<tr>${cells.map((c, j) => cell(tag, c, j)).join('')}</tr>`;
  const caption = options.caption ? `<caption style="text-align:left">${escapeHtml(options.caption)}</caption>` : '';
  return `<table>${caption}<thead>${line('th', head)}</thead><tbody>${rows.map((r) => line('td', r)).join('')}</tbody></table>`;
}

/** A plain-text table with columns padded to equal width. */
export function textTable(head: readonly string[], rows: readonly (readonly unknown[])[]): string {
  const cells = [head, ...rows].map((row) => row.map(String));
  const widths = head.map((_, j) => Math.max(...cells.map((row) => row[j].length)));
  return cells
    .map((row) =>
      row
        .map((c, j) => c.padEnd(widths[j]))
        .join('  ')
        .trimEnd(),
    )
    .join('\n');
}
