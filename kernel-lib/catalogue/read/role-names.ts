import type { BaseRole } from '../roles';

/** What a column's name says about its role. */
export interface NamedRole {
  readonly base: BaseRole;
  /** Whether it is the standard error of that role. */
  readonly isError: boolean;
  /** 0 is the plainest name; a plainer name wins over a rarer one. */
  readonly rank: number;
  /** Unit that the name carries, '' for none: `ra_hours`, `parallax [mas]`. */
  readonly unit: string;
}

/** Names of each role, plainest first; those on one line count as equally plain. Compared without case, see `plain`. */
const NAMES: readonly (readonly [BaseRole, readonly (readonly string[])[]])[] = [
  [
    'identifier',
    [
      ['source_id', 'sourceid', 'star_id', 'starid'],
      ['id', 'identifier', 'main_id'],
      ['designation', 'name', 'star', 'star_name', 'object', 'object_id', 'objid', 'objectid', 'source'],
      ['hip', 'hd', 'hr', 'tyc', 'number', 'no', 'num', 'recno'],
    ],
  ],
  [
    'rightAscension',
    [
      ['ra', 'ra_deg', 'radeg', 'right_ascension', 'rightascension', 'alpha'],
      ['ra_icrs', 'raicrs', 'ra_j2000', 'raj2000', 'ra2000', 'alpha_j2000', '_ra_icrs', '_raj2000', '_ra'],
    ],
  ],
  [
    'declination',
    [
      ['dec', 'dec_deg', 'decdeg', 'de', 'dedeg', 'declination', 'decl', 'delta'],
      [
        'de_icrs',
        'dec_icrs',
        'deicrs',
        'decicrs',
        'dec_j2000',
        'decj2000',
        'dej2000',
        'dec2000',
        'delta_j2000',
        '_de_icrs',
        '_dej2000',
        '_de',
      ],
    ],
  ],
  ['parallax', [['parallax', 'plx', 'par', 'parall', 'varpi', 'pi_trig', 'parallax_mas']]],
  [
    'properMotionRa',
    [
      [
        'pmra',
        'pm_ra',
        'pmra_cosdec',
        'pm_ra_cosdec',
        'pmracosdec',
        'pmrade',
        'pm_ra_star',
        'pmrastar',
        'pmra_star',
        'mu_ra',
        'mura',
        'mu_alpha_star',
        'mualphastar',
        'pm_alpha_star',
        'mu_alpha',
        'pmalpha',
        'proper_motion_ra',
        'propermotionra',
      ],
    ],
  ],
  [
    'properMotionDec',
    [
      [
        'pmdec',
        'pm_dec',
        'pmde',
        'pm_de',
        'mu_dec',
        'mudec',
        'mu_delta',
        'mudelta',
        'pm_delta',
        'pmdelta',
        'proper_motion_dec',
        'propermotiondec',
      ],
    ],
  ],
  [
    'radialVelocity',
    [
      [
        'radial_velocity',
        'radialvelocity',
        'rv',
        'vrad',
        'v_rad',
        'hrv',
        'rvel',
        'radvel',
        'rad_vel',
        'vr',
        'v_r',
        'vlos',
      ],
    ],
  ],
  [
    'magnitude.Ks',
    [['ks', 'ksmag', 'ks_mag', 'kmag', 'k_mag', 'k_m', 'ks_m', 'mag_k', 'mag_ks', 'k2mass', 'k_2mass', '2mass_k']],
  ],
  ['magnitude.J', [['jmag', 'j_mag', 'j_m', 'mag_j', 'j2mass', 'j_2mass', '2mass_j']]],
  ['magnitude.H', [['hmag', 'h_mag', 'h_m', 'mag_h', 'h2mass', 'h_2mass', '2mass_h']]],
  ['magnitude.B', [['bmag', 'b_mag', 'mag_b', 'magb', 'b_johnson', 'johnson_b', 'bjohnson', 'bjmag']]],
  ['magnitude.V', [['vmag', 'v_mag', 'mag_v', 'magv', 'v_johnson', 'johnson_v', 'vjohnson', 'vjmag']]],
  ['magnitude.U', [['u_johnson', 'johnson_u', 'ujohnson', 'ujmag']]],
  ['magnitude.Rc', [['rc', 'rcmag', 'rc_mag', 'mag_rc', 'r_cousins', 'cousins_r', 'rcousins']]],
  ['magnitude.Ic', [['ic', 'icmag', 'ic_mag', 'mag_ic', 'i_cousins', 'cousins_i', 'icousins']]],
  [
    'magnitude.G',
    [['phot_g_mean_mag', 'g_mean_mag', 'gaia_g', 'gaiag', 'gaia_g_mag', 'mag_g_gaia', 'ggaia', 'g_gaia']],
  ],
  [
    'magnitude.BP',
    [
      [
        'bp',
        'bpmag',
        'bp_mag',
        'mag_bp',
        'phot_bp_mean_mag',
        'bp_mean_mag',
        'g_bp_mag',
        'gbp',
        'gbpmag',
        'gbp_mag',
        'gaia_bp',
        'gaiabp',
        'gaia_bp_mag',
      ],
    ],
  ],
  [
    'magnitude.RP',
    [
      [
        'rp',
        'rpmag',
        'rp_mag',
        'mag_rp',
        'phot_rp_mean_mag',
        'rp_mean_mag',
        'g_rp_mag',
        'grp',
        'grpmag',
        'grp_mag',
        'gaia_rp',
        'gaiarp',
        'gaia_rp_mag',
      ],
    ],
  ],
  ['magnitude.Hp', [['hp', 'hpmag', 'hp_mag', 'mag_hp']]],
  [
    'colour.B-V',
    [['b-v', 'b_v', 'bv', '(b-v)', 'bminusv', 'b_minus_v', 'bv_color', 'bv_colour', 'b-v_color', 'b-v_colour']],
  ],
  ['colour.U-B', [['u-b', 'u_b', '(u-b)', 'u_minus_b']]],
  ['colour.BP-RP', [['bp-rp', 'bp_rp', 'bprp', '(bp-rp)', 'bp_minus_rp', 'gbp-grp', 'bp_rp_color', 'bp_rp_colour']]],
  ['colour.BP-G', [['bp-g', 'bp_g', '(bp-g)']]],
  ['colour.G-RP', [['g-rp', 'g_rp', '(g-rp)']]],
  ['colour.J-H', [['j-h', 'j_h', '(j-h)']]],
  ['colour.H-Ks', [['h-k', 'h_k', '(h-k)', 'h-ks', 'h_ks', '(h-ks)']]],
  ['colour.J-Ks', [['j-k', 'j_k', '(j-k)', 'j-ks', 'j_ks', '(j-ks)']]],
  ['colour.V-Ks', [['v-k', 'v_k', '(v-k)', 'v-ks', 'v_ks', '(v-ks)']]],
  ['colour.V-Ic', [['v-ic', 'v_ic', '(v-ic)']]],
  ['colour.V-Rc', [['v-rc', 'v_rc', '(v-rc)']]],
];

/** Names whose case decides: a lone capital is a band of the Johnson-Cousins, 2MASS or Gaia systems. */
const CASED: Readonly<Record<string, BaseRole>> = {
  U: 'magnitude.U',
  Umag: 'magnitude.U',
  U_mag: 'magnitude.U',
  mag_U: 'magnitude.U',
  B: 'magnitude.B',
  V: 'magnitude.V',
  J: 'magnitude.J',
  H: 'magnitude.H',
  K: 'magnitude.Ks',
  G: 'magnitude.G',
  Gmag: 'magnitude.G',
  G_mag: 'magnitude.G',
  mag_G: 'magnitude.G',
};

/** Names that could be a band Coeval knows or one of another system: never settled by themselves. */
export const DOUBTFUL: Readonly<Record<string, readonly BaseRole[]>> = {
  R: ['magnitude.Rc'],
  Rmag: ['magnitude.Rc'],
  R_mag: ['magnitude.Rc'],
  mag_R: ['magnitude.Rc'],
  I: ['magnitude.Ic'],
  Imag: ['magnitude.Ic'],
  I_mag: ['magnitude.Ic'],
  mag_I: ['magnitude.Ic'],
  b: ['magnitude.B'],
  v: ['magnitude.V'],
  j: ['magnitude.J'],
  h: ['magnitude.H'],
  k: ['magnitude.Ks'],
  u: ['magnitude.U'],
  umag: ['magnitude.U'],
  u_mag: ['magnitude.U'],
  mag_u: ['magnitude.U'],
  g: ['magnitude.G'],
  gmag: ['magnitude.G'],
  g_mag: ['magnitude.G'],
  mag_g: ['magnitude.G'],
  'V-I': ['colour.V-Ic'],
  'V-R': ['colour.V-Rc'],
};

const BY_NAME: ReadonlyMap<string, { base: BaseRole; rank: number }> = new Map(
  NAMES.flatMap(([base, ranks]) =>
    ranks.flatMap((names, rank) => names.map((name) => [name, { base, rank }] as const)),
  ),
);

const UNIT_SUFFIXES: readonly (readonly [RegExp, string])[] = [
  [/_(?:deg|degrees|d)$/i, 'deg'],
  [/_rad$/i, 'rad'],
  [/_(?:hours|hourangle|h)$/i, 'hourangle'],
  [/_mas$/i, 'mas'],
  [/_arcsec$/i, 'arcsec'],
  [/_mas_?(?:per_?)?yr$/i, 'mas/yr'],
  [/_arcsec_?(?:per_?)?yr$/i, 'arcsec/yr'],
  [/_(?:kms|km_s)$/i, 'km/s'],
];

/** A name with the unit in brackets at its end, as in `parallax [mas]` or `ra (deg)`. */
export function splitBracketUnit(name: string): { stem: string; unit: string } {
  const match = /^(.+?)\s*(?:\[([^\][]*)\]|(?<=\s)\(([^()]*)\))$/.exec(name.trim());
  return match ? { stem: match[1], unit: (match[2] ?? match[3]).trim() } : { stem: name.trim(), unit: '' };
}

/** The role that a column's name stands for, or null. */
export function roleOfName(name: string): NamedRole | null {
  const { stem, unit } = splitBracketUnit(name);
  for (const candidate of [stem, stem.slice(stem.lastIndexOf('.') + 1)]) {
    const plainRole = baseOf(candidate);
    if (plainRole) return { ...plainRole, isError: false, unit: unit || plainRole.unit };
    const inner = withoutError(candidate);
    const role = inner === null ? null : (baseOf(inner) ?? doubtfulBase(inner));
    if (role) return { ...role, isError: true, unit: unit || role.unit };
  }
  return null;
}

function baseOf(name: string): { base: BaseRole; rank: number; unit: string } | null {
  if (Object.hasOwn(CASED, name)) return { base: CASED[name], rank: 0, unit: '' };
  const word = plain(name);
  const known = BY_NAME.get(word);
  if (known) return { ...known, unit: UNIT_SUFFIXES.find(([suffix]) => suffix.test(word))?.[1] ?? '' };
  for (const [suffix, unit] of UNIT_SUFFIXES) {
    const shorter = word.replace(suffix, '');
    const found = shorter === word ? undefined : BY_NAME.get(shorter);
    if (found) return { ...found, unit };
  }
  return null;
}

function doubtfulBase(name: string): { base: BaseRole; rank: number; unit: string } | null {
  return Object.hasOwn(DOUBTFUL, name) ? { base: DOUBTFUL[name][0], rank: 1, unit: '' } : null;
}

/** The name of the quantity whose error a column is, or null when the name does not say that it is an error. */
export function withoutError(name: string): string | null {
  const after = /^(.+?)[_ .-]?(?:error|err|unc|uncertainty|sigma|stddev|std|sd|msigcom|cmsig)$/i.exec(name);
  if (after) return after[1];
  const before = /^(?:e|err|error|sigma|sig|s|unc|std|sd|d)[_ .](.+)$/i.exec(name);
  // e_bv and e_bp_rp may as well be the colour excess; e_B-V is an error.
  if (before) return /^e$/i.test(name.slice(0, 1)) && name[1] === '_' && isColourWord(before[1]) ? null : before[1];
  const joined = /^(?:e|err|sig|sigma)(?=[A-Z])(.+)$/.exec(name);
  return joined ? joined[1] : null;
}

function isColourWord(name: string): boolean {
  return !name.includes('-') && (BY_NAME.get(plain(name))?.base.startsWith('colour.') ?? false);
}

/** Lower case, blanks and points as underscores. */
function plain(name: string): string {
  return name
    .trim()
    .toLowerCase()
    .replace(/[\s.]+/g, '_')
    .replace(/\*/g, '')
    .replace(/\*?cos\(?(?:de|dec)\)?$/, '_cosdec')
    .replace(/__+/g, '_');
}
