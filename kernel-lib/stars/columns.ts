/** Names of the columns that this room adds to a catalogue. */
export const STAR_COLUMNS = {
  /** log10 of effective temperature, K. */
  logTeff: 'log_teff',
  logTeffError: 'log_teff_error',
  logTeffShared: 'log_teff_shared_error',
  /** log10 of luminosity, solar. */
  logL: 'log_l',
  logLError: 'log_l_error',
  logLShared: 'log_l_shared_error',
  /** Solar radii. */
  radius: 'radius',
  radiusError: 'radius_error',
  radiusShared: 'radius_shared_error',
  spectralClass: 'spectral_class',
  group: 'group',
} as const;
