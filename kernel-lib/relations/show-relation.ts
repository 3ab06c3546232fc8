import type { Measured } from '../quantity/measured';
import { escapeHtml, htmlTable, type Presentation, textTable } from '../quantity/present';
import type { MassRelationFit } from './mass-relation';

/** Tables and lines in which a fitted relation shows itself. */
interface Shown {
  readonly title: string;
  readonly pieces: { readonly head: readonly string[]; readonly rows: readonly (readonly string[])[] };
  readonly more: readonly {
    readonly head: readonly string[];
    readonly rows: readonly (readonly string[])[];
    readonly caption: string;
  }[];
  readonly lines: readonly string[];
}

/** Stars listed of each kind. */
const MOST_LISTED = 8;

/** How a fitted relation shows itself. @param extra columns of the table of pieces, and tables after it */
export function relationPresentation(
  fit: MassRelationFit,
  extra: {
    readonly head: readonly string[];
    readonly cells: (piece: number) => readonly string[];
    readonly tables: () => Shown['more'];
  },
): Presentation {
  const shown = () => contents(fit, extra);
  return {
    text() {
      const { title, pieces, more, lines } = shown();
      const tables = more.map((t) => `\n${t.caption}\n${textTable(t.head, t.rows)}`).join('\n');
      return `${title}\n${textTable(pieces.head, pieces.rows)}${tables}\n${lines.join('\n')}`;
    },
    html() {
      const { title, pieces, more, lines } = shown();
      const numeric = (head: readonly string[]) => head.map((_, j) => j).slice(1);
      const first = htmlTable(pieces.head, pieces.rows, { caption: title, numeric: numeric(pieces.head) });
      const rest = more
        .map((t) => htmlTable(t.head, t.rows, { caption: t.caption, numeric: numeric(t.head) }))
        .join('');
      return `<div>${first}${rest}<ul>${lines.map((l) => `<li>${escapeHtml(l)}</li>`).join('')}</ul></div>`;
    },
  };
}

function contents(fit: MassRelationFit, extra: Parameters<typeof relationPresentation>[1]): Shown {
  const { exponents, breaks, constants, starsOnPiece, massRange, comparison, outliers, leverage, excluded } = fit;
  const edge = (k: number) =>
    k === 0 ? solar(massRange[0]) : k > breaks.length ? solar(massRange[1]) : plain(breaks[k - 1]);
  const rows = exponents.map((e, k) => [
    `${edge(k)} to ${edge(k + 1)}`,
    String(starsOnPiece[k]),
    String(e),
    plain(constants[k]),
    ...extra.cells(k),
  ]);
  const head = ['masses (solar)', 'stars', 'exponent', 'log10 at 1 solar mass', ...extra.head];
  const letter = fit.quantity === 'luminosity' ? 'L' : 'R';
  const lines = [
    `intrinsic scatter in log ${letter}: ${String(fit.scatter)}`,
    ...(fit.bic.length > 1
      ? [
          `BIC by number of breaks: ${fit.bic.map((s) => `${s.breaks}: ${s.bic.toFixed(1)}`).join(', ')} (smaller is better)`,
        ]
      : []),
    ...comparison.bias,
    listed('Outliers (beyond 3 sigma)', outliers, (o) => `${o.name} (${signed(o.sigmas)} sigma)`),
    listed('High leverage', leverage, (l) => `${l.name} (${solar(l.mass)} solar masses, ${l.leverage.toFixed(2)})`),
    listed('Not fitted', excluded, (e) => e.name),
    ...fit.notes,
  ].filter((line) => line !== '');
  return {
    title: `Mass-${fit.quantity} relation of ${fit.starCount} stars: ${letter} ∝ M^exponent`,
    pieces: { head, rows },
    more: extra.tables(),
    lines,
  };
}

function listed<T>(title: string, items: readonly T[], word: (item: T) => string): string {
  if (items.length === 0) return '';
  const more = items.length > MOST_LISTED ? `, and ${items.length - MOST_LISTED} more` : '';
  return `${title}, ${items.length}: ${items.slice(0, MOST_LISTED).map(word).join(', ')}${more}`;
}

/** A measured value without its unit. */
function plain(m: Measured): string {
  return m.unit === '' ? String(m) : String(m).slice(0, -m.unit.length - 1);
}

function solar(mass: number): string {
  return String(Number(mass.toPrecision(3)));
}

function signed(v: number): string {
  return `${v < 0 ? '-' : '+'}${Math.abs(v).toFixed(1)}`;
}
