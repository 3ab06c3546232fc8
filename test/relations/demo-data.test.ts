import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { makeFiles, truth } from '../../data-demo/make-eclipsing-binaries.mjs';
import { readCatalogue } from '../../kernel-lib/catalogue/read/read-catalogue';
import { fitMassLuminosity } from '../../kernel-lib/relations/mass-luminosity';

const path = join(import.meta.dirname, '..', '..', 'data-demo', 'eclipsing-binaries.csv');

describe('the invented eclipsing binaries of data-demo', () => {
  it('are what their maker makes', async () => {
    const files = (await makeFiles()) as Record<string, Uint8Array>;
    expect(Buffer.from(files['eclipsing-binaries.csv']).equals(readFileSync(path))).toBe(true);
  });

  it('hold forty systems, some evolved, and serve the fit as they are', async () => {
    const binaries = await readCatalogue(path);
    expect(binaries.rowCount).toBe(2 * truth.systems);
    const fit = fitMassLuminosity(binaries, { breaks: 1, resamples: 100 });
    expect(fit.excluded.length).toBeGreaterThanOrEqual(truth.evolved - 1);
    for (const star of fit.excluded) expect(star.reason).toMatch(/^larger/);
    expect(fit.starCount).toBeGreaterThan(65);
  });
});
