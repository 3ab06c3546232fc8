import type { Presentation } from '../quantity/present';
import { escapeHtml, htmlTable, textTable } from '../quantity/present';
import type { Catalogue } from './catalogue';

/** How a catalogue shows itself. */
export function presentCatalogue(catalogue: Catalogue): Presentation {
  const head = ['column', 'kind', 'unit', 'missing'];
  const rows = () => catalogue.columns.map((c) => [c.name, c.kind, c.unit, c.missing]);
  const title = () => `${catalogue.source}: ${catalogue.rowCount} rows, ${catalogue.columns.length} columns`;
  return {
    text: () => `${title()}\n${textTable(head, rows())}`,
    html: () => `<div><p>${escapeHtml(title())}</p>${htmlTable(head, rows(), { numeric: [3] })}</div>`,
  };
}
