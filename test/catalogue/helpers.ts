import { existsSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { Catalogue } from '../../kernel-lib/catalogue/catalogue';
import type { ColumnData } from '../../kernel-lib/catalogue/columns';
import type { Roles } from '../../kernel-lib/catalogue/roles';

/** A text as the bytes of a file. */
export function bytes(text: string): Uint8Array {
  return new TextEncoder().encode(text);
}

/** A catalogue of numbers and texts, for tests. */
export function table(columns: Record<string, ColumnData['values'] | number[]>, roles: Roles = {}): Catalogue {
  const data = Object.entries(columns).map(([name, values]) => ({
    name,
    values: Array.isArray(values) && typeof values[0] === 'number' ? Float64Array.from(values as number[]) : values,
  })) as ColumnData[];
  return new Catalogue({ source: 'test', rowCount: data[0].values.length, columns: data, roles });
}

/** The Python that has astropy and pandas: COEVAL_PYTHON, or .venv beside the package root. */
export function pythonPath(): string {
  const own = fileURLToPath(new URL('../../.venv/bin/python', import.meta.url));
  const given = process.env.COEVAL_PYTHON;
  if (given) return given;
  if (existsSync(own)) return own;
  throw new Error('No Python with astropy: npm test makes .venv; else set COEVAL_PYTHON to one.');
}

export async function gzip(content: Uint8Array): Promise<Uint8Array> {
  const stream = new Blob([content as BlobPart]).stream().pipeThrough(new CompressionStream('gzip'));
  return new Uint8Array(await new Response(stream).arrayBuffer());
}
