import { checkChoice, checkOptions, describe } from '../../quantity/options';
import { Catalogue } from '../catalogue';
import { writeFileBytes } from '../files';
import type { CatalogueFormat } from '../read/read-catalogue';
import { writeCsv, writeTsv } from './csv';
import { writeEcsv } from './ecsv';

const WRITERS: Readonly<Record<CatalogueFormat, (catalogue: Catalogue) => Iterable<Uint8Array>>> = {
  csv: writeCsv,
  tsv: writeTsv,
  ecsv: writeEcsv,
};
const FORMATS = Object.keys(WRITERS) as CatalogueFormat[];

export interface WriteCatalogueOptions {
  /** Format; by default what the path ends in: .csv, .tsv or .ecsv, each also with .gz. */
  readonly format?: CatalogueFormat;
  /** Whether an existing file may be replaced; false by default. */
  readonly overwrite?: boolean;
}

/**
 * Writes a catalogue to a file, gzipped where the path ends in .gz. Numbers read back as the same doubles. ECSV keeps units,
 * descriptions, UCDs, roles and history; CSV and TSV keep names and values only.
 * @param path where to write; the folder must exist
 * @throws Error when the file exists and overwrite is not true, when the format is unknown or the file cannot be written
 * @example await writeCatalogue(members, 'members.ecsv')
 */
export async function writeCatalogue(
  catalogue: Catalogue,
  path: string,
  options: WriteCatalogueOptions = {},
): Promise<void> {
  const caller = 'writeCatalogue';
  checkOptions(caller, options, ['format', 'overwrite']);
  if (!(catalogue instanceof Catalogue)) {
    throw new TypeError(`${caller}: expected a Catalogue first, got ${describe(catalogue)}.`);
  }
  if (typeof path !== 'string' || path === '') {
    throw new TypeError(`${caller}: expected a path such as "members.ecsv", got ${describe(path)}.`);
  }
  const ending = /\.([a-z]+)(?:\.gz)?$/i.exec(path)?.[1].toLowerCase();
  const format = options.format ?? FORMATS.find((f) => f === ending);
  if (format === undefined) {
    throw new Error(
      `${caller}: ${describe(path)} does not say the format; end it in .${FORMATS.join(', .')} or pass format.`,
    );
  }
  checkChoice(caller, 'format', format, FORMATS);
  if (catalogue.columns.length === 0) throw new Error(`${caller}: the catalogue has no columns.`);
  const parts = WRITERS[format](catalogue);
  await writeFileBytes(caller, path, /\.gz$/i.test(path) ? await gzipped(parts) : parts, options.overwrite === true);
}

async function gzipped(parts: Iterable<Uint8Array>): Promise<Uint8Array[]> {
  const stream = new Blob([...parts] as BlobPart[]).stream().pipeThrough(new CompressionStream('gzip'));
  return [new Uint8Array(await new Response(stream).arrayBuffer())];
}
