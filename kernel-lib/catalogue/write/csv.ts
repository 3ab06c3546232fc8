import type { Catalogue } from '../catalogue';
import { delimitedRows } from './delimited-rows';

/** A catalogue as comma-separated text in UTF-8. CSV holds names and values; units, roles and history need ECSV. */
export function writeCsv(catalogue: Catalogue): Iterable<Uint8Array> {
  return delimitedRows(catalogue.columnData(), catalogue.rowCount, { delimiter: ',', booleans: ['false', 'true'] });
}

/** As `writeCsv`, with tabs. */
export function writeTsv(catalogue: Catalogue): Iterable<Uint8Array> {
  return delimitedRows(catalogue.columnData(), catalogue.rowCount, { delimiter: '\t', booleans: ['false', 'true'] });
}
