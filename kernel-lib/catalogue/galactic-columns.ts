import { galacticOf } from '../numeric/galactic-frame';
import type { Catalogue } from './catalogue';

/**
 * The catalogue with Galactic longitude and latitude, columns `galactic_l` (0 to 360 deg) and `galactic_b` (deg), from the
 * roles rightAscension and declination (ICRS). Rows without a position get NaN.
 * Source: The Hipparcos and Tycho Catalogues, ESA SP-1200 (1997), Vol. 1, Sect. 1.5.3 (from memory).
 * @throws Error when a role is missing
 * @example withGalactic(stars).numbers('galactic_b')
 */
export function withGalactic(catalogue: Catalogue): Catalogue {
  const ra = catalogue.numbers('rightAscension');
  const dec = catalogue.numbers('declination');
  const l = new Float64Array(ra.length);
  const b = new Float64Array(ra.length);
  for (let i = 0; i < ra.length; i++) {
    const place = galacticOf(ra[i], dec[i]);
    l[i] = place.l;
    b[i] = place.b;
  }
  return catalogue.withColumns(
    [
      { name: 'galactic_l', values: l, unit: 'deg', description: 'Galactic longitude', ucd: 'pos.galactic.lon' },
      { name: 'galactic_b', values: b, unit: 'deg', description: 'Galactic latitude', ucd: 'pos.galactic.lat' },
    ],
    'Galactic coordinates from equatorial (ICRS)',
  );
}
