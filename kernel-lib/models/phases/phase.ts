/** Phase of a star's life, as the small number held in typed columns. */
export const PHASE = {
  mainSequence: 0,
  hertzsprungGap: 1,
  giantBranch: 2,
  coreHelium: 3,
  earlyAsymptotic: 4,
  pulsingAsymptotic: 5,
  heliumMainSequence: 6,
  heliumGiant: 7,
  heliumWhiteDwarf: 8,
  carbonWhiteDwarf: 9,
  neonWhiteDwarf: 10,
  neutronStar: 11,
  blackHole: 12,
  noRemnant: 13,
} as const;

/** Words for the phases, indexed by their number. */
export const PHASE_NAMES: readonly string[] = Object.freeze([
  'main sequence',
  'Hertzsprung gap',
  'first giant branch',
  'core helium burning',
  'early asymptotic giant branch',
  'thermally pulsing asymptotic giant branch',
  'helium main sequence',
  'helium giant',
  'helium white dwarf',
  'carbon-oxygen white dwarf',
  'oxygen-neon white dwarf',
  'neutron star',
  'black hole',
  'no remnant',
]);

/** What a star is like at one moment. Reused in loops, so its fields are written over. */
export class StarState {
  phase = 0;
  /** Current mass, solar. */
  mass: number = Number.NaN;
  luminosity: number = Number.NaN;
  radius: number = Number.NaN;
  /** Mass of the helium core, or of the carbon-oxygen core once the two have become one; 0 on the main sequence. */
  coreMass: number = Number.NaN;
}
