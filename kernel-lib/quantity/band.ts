/** Photometric bands: Johnson-Cousins UBVRcIc, 2MASS JHKs, Gaia G BP RP (DR3), Hipparcos Hp. */
export type Band = 'U' | 'B' | 'V' | 'Rc' | 'Ic' | 'J' | 'H' | 'Ks' | 'G' | 'BP' | 'RP' | 'Hp';

/** Every band, blue to red within each system. */
export const BAND_NAMES: readonly Band[] = ['U', 'B', 'V', 'Rc', 'Ic', 'J', 'H', 'Ks', 'G', 'BP', 'RP', 'Hp'];

/** A colour index written as the trade writes it, for example `B-V` or `BP-RP`. */
export type ColourName = `${Band}-${Band}`;

/** The two bands of a colour index. @throws TypeError when it is not two known bands joined by a hyphen */
export function bandsOfColour(colour: string): { blue: Band; red: Band } {
  const parts = colour.split('-');
  if (parts.length === 2 && parts.every((p) => (BAND_NAMES as readonly string[]).includes(p))) {
    return { blue: parts[0] as Band, red: parts[1] as Band };
  }
  throw new TypeError(`colour "${colour}" is not two bands joined by a hyphen; bands are ${BAND_NAMES.join(', ')}.`);
}
