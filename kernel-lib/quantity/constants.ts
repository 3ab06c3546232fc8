/** Nominal solar effective temperature, K. Source: IAU 2015 Resolution B3. */
export const SOLAR_TEMPERATURE = 5772;

/** Nominal solar luminosity, W. Source: IAU 2015 Resolution B3. */
export const SOLAR_LUMINOSITY_W = 3.828e26;

/** Nominal solar radius, m. Source: IAU 2015 Resolution B3. */
export const SOLAR_RADIUS_M = 6.957e8;

/** Nominal solar mass parameter GM, m^3 s^-2. Source: IAU 2015 Resolution B3. */
export const SOLAR_MASS_PARAMETER = 1.3271244e20;

/**
 * Absolute bolometric magnitude of the nominal Sun, mag.
 * Source: IAU 2015 Resolution B2: zero point 3.0128e28 W, so -2.5 log10(3.828e26 / 3.0128e28) = 4.74 (4.739996 unrounded).
 */
export const SOLAR_BOLOMETRIC_MAGNITUDE = 4.74;

/** log10 of the Sun's surface gravity in cm s^-2, from the nominal mass parameter and radius (4.438). */
export const SOLAR_LOG_GRAVITY: number = Math.log10((SOLAR_MASS_PARAMETER / SOLAR_RADIUS_M ** 2) * 100);

/** Stefan-Boltzmann constant, W m^-2 K^-4. Source: CODATA 2018 (exact to the digits given). */
export const STEFAN_BOLTZMANN = 5.670374419e-8;

/** Wien displacement constant, m K. Source: CODATA 2018. */
export const WIEN_DISPLACEMENT = 2.897771955e-3;

/** Parsec, m: 648000/pi astronomical units. Source: IAU 2015 Resolution B2, note 4. */
export const PARSEC_M: number = (648000 / Math.PI) * 149597870700;

/** km/s of one astronomical unit per Julian year: turns (mas/yr)/mas into km/s. Source: IAU 2012 Resolution B2. */
export const KMS_PER_AU_PER_YEAR = 4.740470463533349;

/** Degrees to radians. */
export const RADIANS_PER_DEGREE: number = Math.PI / 180;
