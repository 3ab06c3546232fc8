import { stringify } from 'yaml';
import type { Catalogue } from '../catalogue';
import type { ColumnInfo } from '../columns';
import { delimitedRows } from './delimited-rows';

const DATATYPES = { number: 'float64', text: 'string', boolean: 'bool' } as const;

/**
 * A catalogue as ECSV (Astropy Proposal for Enhancement 6, version 1.0): unit, description and UCD of every column, and under
 * `coeval` in the table's keywords its roles, history and warnings.
 */
export function* writeEcsv(catalogue: Catalogue): Generator<Uint8Array> {
  const header = {
    datatype: catalogue.columns.map(declaration),
    delimiter: ',',
    meta: {
      ...catalogue.meta,
      coeval: {
        source: catalogue.source,
        roles: { ...catalogue.roles },
        history: catalogue.history.map((step) => ({ ...step })),
        warnings: [...catalogue.warnings],
      },
    },
    schema: 'astropy-2.0',
  };
  // YAML 1.1 is what readers of ECSV use: there, words such as yes and on need quotes.
  const yaml = stringify(header, { version: '1.1', lineWidth: 0, aliasDuplicateObjects: false });
  const lines = yaml.trimEnd().split('\n');
  yield new TextEncoder().encode(`# %ECSV 1.0\n# ---\n${lines.map((line) => `# ${line}\n`).join('')}`);
  yield* delimitedRows(catalogue.columnData(), catalogue.rowCount, { delimiter: ',', booleans: ['False', 'True'] });
}

function declaration(column: ColumnInfo): Record<string, unknown> {
  const entry: Record<string, unknown> = { name: column.name };
  if (column.unit !== '') entry.unit = column.unit;
  entry.datatype = DATATYPES[column.kind];
  if (column.description !== '') entry.description = column.description;
  if (column.ucd !== '') entry.meta = { ucd: column.ucd };
  return entry;
}
