/**
 * An age as it is spoken.
 * @param logAge log10 of the age in years
 * @example ageLabel(8.8451) // => '700 Myr'
 */
export function ageLabel(logAge: number): string {
  const years = 10 ** logAge;
  return years < 0.9995e9
    ? `${Number((years / 1e6).toPrecision(3))} Myr`
    : `${Number((years / 1e9).toPrecision(3))} Gyr`;
}
