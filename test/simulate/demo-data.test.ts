import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { makeFiles, truth } from '../../data-demo/make.mjs';
import { readCatalogue } from '../../kernel-lib/catalogue/read/read-catalogue';

const folder = join(import.meta.dirname, '..', '..', 'data-demo');

describe('the invented catalogue of data-demo', () => {
  it('is made again byte for byte by its script', async () => {
    for (const [name, bytes] of Object.entries(await makeFiles())) {
      expect(Buffer.compare(readFileSync(join(folder, name)), bytes), name).toBe(0);
    }
  });

  it('reads with every role found, nothing missing, and no word of the truth', async () => {
    const field = await readCatalogue(join(folder, 'calvessa-field.csv'));
    expect(field.rowCount).toBe(truth.members + truth.fieldStars);
    expect(Object.keys(field.roles).sort()).toEqual(
      [
        'identifier',
        ...['rightAscension', 'declination'],
        ...['parallax', 'properMotionRa', 'properMotionDec'].flatMap((role) => [role, `${role}.error`]),
        ...['G', 'BP', 'RP', 'B', 'V'].flatMap((band) => [`magnitude.${band}`, `magnitude.${band}.error`]),
      ].sort(),
    );
    for (const column of field.columns) expect([column.name, column.missing]).toEqual([column.name, 0]);
    expect(field.columns.some((c) => /true|member/i.test(c.name))).toBe(false);
  });
});
