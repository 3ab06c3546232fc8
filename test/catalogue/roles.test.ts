import { describe, expect, it } from 'vitest';
import { readCatalogue } from '../../kernel-lib/catalogue/read/read-catalogue';
import { recogniseRoles } from '../../kernel-lib/catalogue/read/recognise-roles';
import { roleOfName } from '../../kernel-lib/catalogue/read/role-names';
import { roleOfUcd } from '../../kernel-lib/catalogue/read/role-ucds';
import { bytes } from './helpers';

const named = (...names: string[]) => names.map((name) => ({ name, kind: 'number' as const }));
const rolesOf = (...names: string[]) => recogniseRoles(named(...names)).roles;

describe('roles by name', () => {
  it.each<[string, string]>([
    ['ra', 'rightAscension'],
    ['RA', 'rightAscension'],
    ['ra_deg', 'rightAscension'],
    ['RAdeg', 'rightAscension'],
    ['raj2000', 'rightAscension'],
    ['RA_ICRS', 'rightAscension'],
    ['_RAJ2000', 'rightAscension'],
    ['right_ascension', 'rightAscension'],
    ['Right Ascension', 'rightAscension'],
    ['dec', 'declination'],
    ['DEdeg', 'declination'],
    ['dej2000', 'declination'],
    ['DE_ICRS', 'declination'],
    ['Decl', 'declination'],
    ['parallax', 'parallax'],
    ['plx', 'parallax'],
    ['Plx', 'parallax'],
    ['parallax_mas', 'parallax'],
    ['pmra', 'properMotionRa'],
    ['pmRA', 'properMotionRa'],
    ['pm_ra_cosdec', 'properMotionRa'],
    ['mu_alpha_star', 'properMotionRa'],
    ['pmRA*', 'properMotionRa'],
    ['pmdec', 'properMotionDec'],
    ['pmDE', 'properMotionDec'],
    ['mu_delta', 'properMotionDec'],
    ['radial_velocity', 'radialVelocity'],
    ['RV', 'radialVelocity'],
    ['HRV', 'radialVelocity'],
    ['rv_kms', 'radialVelocity'],
    ['B', 'magnitude.B'],
    ['Bmag', 'magnitude.B'],
    ['b_mag', 'magnitude.B'],
    ['V', 'magnitude.V'],
    ['vmag', 'magnitude.V'],
    ['mag_V', 'magnitude.V'],
    ['U', 'magnitude.U'],
    ['Umag', 'magnitude.U'],
    ['Ic', 'magnitude.Ic'],
    ['Rcmag', 'magnitude.Rc'],
    ['phot_g_mean_mag', 'magnitude.G'],
    ['Gmag', 'magnitude.G'],
    ['phot_bp_mean_mag', 'magnitude.BP'],
    ['RPmag', 'magnitude.RP'],
    ['Jmag', 'magnitude.J'],
    ['j_m', 'magnitude.J'],
    ['Hmag', 'magnitude.H'],
    ['Kmag', 'magnitude.Ks'],
    ['ks_m', 'magnitude.Ks'],
    ['Hpmag', 'magnitude.Hp'],
    ['B-V', 'colour.B-V'],
    ['b_v', 'colour.B-V'],
    ['(B-V)', 'colour.B-V'],
    ['bp_rp', 'colour.BP-RP'],
    ['BP-RP', 'colour.BP-RP'],
    ['g_rp', 'colour.G-RP'],
    ['J-K', 'colour.J-Ks'],
    ['parallax [mas]', 'parallax'],
    ['ra (deg)', 'rightAscension'],
    ['sky.ra', 'rightAscension'],
    ['source_id', 'identifier'],
    ['HIP', 'identifier'],
    ['Name', 'identifier'],
  ])('%s is %s', (name, role) => {
    expect(rolesOf(name)).toEqual({ [role]: name });
  });

  it.each<[string, string, string]>([
    ['plx', 'e_plx', 'parallax'],
    ['Plx', 'e_Plx', 'parallax'],
    ['parallax', 'parallax_error', 'parallax'],
    ['plx', 'err_plx', 'parallax'],
    ['plx', 'sigma_plx', 'parallax'],
    ['parallax', 'parallaxErr', 'parallax'],
    ['Plx', 'ePlx', 'parallax'],
    ['plx', 'plx_unc', 'parallax'],
    ['pmra', 'pmra_error', 'properMotionRa'],
    ['pmRA', 'e_pmRA', 'properMotionRa'],
    ['pmDE', 'e_pmDE', 'properMotionDec'],
    ['Vmag', 'e_Vmag', 'magnitude.V'],
    ['v_mag', 'v_err', 'magnitude.V'],
    ['V', 'sigV', 'magnitude.V'],
    ['b_mag', 'b_mag_error', 'magnitude.B'],
    ['Jmag', 'e_Jmag', 'magnitude.J'],
    ['j_m', 'j_msigcom', 'magnitude.J'],
    ['phot_g_mean_mag', 'phot_g_mean_mag_error', 'magnitude.G'],
    ['B-V', 'e_B-V', 'colour.B-V'],
    ['ra', 'ra_error', 'rightAscension'],
    ['RV', 'e_RV', 'radialVelocity'],
  ])('%s with error %s', (name, error, role) => {
    expect(rolesOf(name, error)).toEqual({ [role]: name, [`${role}.error`]: error });
  });

  it.each([
    'teff',
    'logg',
    'ebv',
    'E(B-V)',
    'e_bv',
    'e_bp_rp',
    'gal_l',
    'l',
    'magnitude',
    'mass',
    'radius',
    'decay',
    'range',
    'ruwe',
    'bt',
    'VTmag',
    'w1mpro',
    'phot_g_mean_flux',
    'phot_g_mean_flux_error',
    'parallax_over_error',
    'ra_dec_corr',
    'parallax_pmra_corr',
    'nb_obs',
    'zmag',
    'class',
    'e_teff',
    'period',
    'constructor',
    '__proto__',
    'toString',
    '',
  ])('%j is nothing known', (name) => {
    expect(roleOfName(name)).toBeNull();
    expect(rolesOf(name)).toEqual({});
  });

  it('leaves a role open that two columns could carry, and names them', () => {
    const r = recogniseRoles(named('ra', 'V', 'Vmag', 'parallax', 'plx'));
    expect(r.roles).toEqual({ rightAscension: 'ra' });
    expect(r.open.map((o) => [o.role, o.candidates])).toEqual([
      ['parallax', ['parallax', 'plx']],
      ['magnitude.V', ['V', 'Vmag']],
    ]);
    expect(rolesOf('ra', 'raj2000')).toEqual({ rightAscension: 'ra' });
    expect(rolesOf('source_id', 'name', 'hip')).toEqual({ identifier: 'source_id' });
  });

  it('lets the company decide names of several systems', () => {
    expect(rolesOf('g', 'bp', 'rp')).toMatchObject({ 'magnitude.G': 'g' });
    expect(rolesOf('umag', 'bmag', 'vmag')).toMatchObject({ 'magnitude.U': 'umag' });
    expect(rolesOf('umag', 'gmag', 'rmag', 'imag', 'zmag')).toEqual({});
    expect(rolesOf('b', 'v')).toEqual({ 'magnitude.B': 'b', 'magnitude.V': 'v' });
    expect(rolesOf('l', 'b', 'v')).toEqual({});
    expect(rolesOf('j', 'h', 'k')).toEqual({ 'magnitude.J': 'j', 'magnitude.H': 'h', 'magnitude.Ks': 'k' });
    expect(recogniseRoles(named('R', 'I', 'V-I')).open.map((o) => o.role)).toEqual([
      'magnitude.Rc',
      'magnitude.Ic',
      'colour.V-Ic',
    ]);
  });

  it('does not believe a name against its unit or its kind', () => {
    expect(recogniseRoles([{ name: 'V', kind: 'number', unit: 'km/s' }]).roles).toEqual({});
    expect(recogniseRoles([{ name: 'b', kind: 'number', unit: 'deg' }]).open).toEqual([]);
    const text = recogniseRoles([{ name: 'ra', kind: 'text' }]);
    expect(text.roles).toEqual({});
    expect(text.open).toEqual([{ role: 'rightAscension', candidates: ['ra'], why: 'it holds text, not numbers' }]);
    expect(recogniseRoles([{ name: 'name', kind: 'text' }]).roles).toEqual({ identifier: 'name' });
  });

  it('leaves an error without its quantity alone', () => {
    expect(rolesOf('e_plx')).toEqual({});
    expect(rolesOf('plx', 'parallax', 'e_plx')).toEqual({});
  });
});

describe('roles by UCD', () => {
  // Words of "The UCD1+ controlled vocabulary", IVOA Recommendation 1.5, as catalogue services combine them.
  it.each<[string, string | null]>([
    ['meta.id;meta.main', 'identifier'],
    ['pos.eq.ra;meta.main', 'rightAscension'],
    ['pos.eq.dec', 'declination'],
    ['pos.parallax', 'parallax'],
    ['pos.parallax.trig', 'parallax'],
    ['pos.pm;pos.eq.ra', 'properMotionRa'],
    ['pos.pm;pos.eq.dec', 'properMotionDec'],
    ['spect.dopplerVeloc.opt;em.opt.I', 'radialVelocity'],
    ['phys.veloc;pos.heliocentric', 'radialVelocity'],
    ['phot.mag;em.opt.V', 'magnitude.V'],
    ['phot.mag;em.IR.K', 'magnitude.Ks'],
    ['phot.color;em.opt.B;em.opt.V', 'colour.B-V'],
    ['STAT.ERROR;POS.PARALLAX', 'parallax.error'],
    ['stat.error;pos.eq.ra', 'rightAscension.error'],
    ['stat.error;phot.mag;em.opt.B', 'magnitude.B.error'],
    ['phot.flux;em.opt', null],
    ['pos.galactic.lon', null],
    ['phys.veloc.rotat', null],
    ['phys.veloc;phys.veloc.rotat', null],
    ['pos.eq.ra;stat.stdev', null],
    ['stat.correlation;pos.eq.ra;pos.parallax', null],
    ['meta.id.part', null],
    ['', null],
  ])('%s is %s', (ucd, role) => {
    const found = roleOfUcd(ucd);
    expect(found === null ? null : `${found.base}${found.isError ? '.error' : ''}`).toBe(role);
  });

  it('win over names; the main one wins; a doubtful band does not', () => {
    const r = recogniseRoles([
      { name: 'x', kind: 'number', ucd: 'pos.eq.ra;meta.main' },
      { name: 'ra', kind: 'number', ucd: 'pos.eq.ra' },
      { name: 'p', kind: 'number', ucd: 'pos.parallax.trig' },
      { name: 'phot_bp_mean_mag', kind: 'number', ucd: 'phot.mag;em.opt.B' },
      { name: 'gpmag', kind: 'number', ucd: 'phot.mag;em.opt.B' },
      { name: 'Vmag', kind: 'number', ucd: 'phot.mag;em.opt.V' },
    ]);
    expect(r.roles).toEqual({
      rightAscension: 'x',
      parallax: 'p',
      'magnitude.BP': 'phot_bp_mean_mag',
      'magnitude.V': 'Vmag',
    });
    expect(r.found).toMatchObject({ rightAscension: 'ucd', 'magnitude.BP': 'name' });
    expect(r.open).toEqual([
      { role: 'magnitude.B', candidates: ['gpmag'], why: expect.stringContaining('does not say which system') },
    ]);
  });
});

describe('roles in a catalogue', () => {
  it('given ones stand above recognised ones; open ones are told with the way to settle them', async () => {
    const content = bytes('ra,plx,parallax,B,Bmag,m\n1,2,3,4,5,6\n');
    const c = await readCatalogue(content);
    expect(c.roles).toEqual({ rightAscension: 'ra' });
    expect(c.warnings).toContain(
      'Role parallax is not assigned: "plx", "parallax" (these columns may carry it equally well). Say it with roles: { parallax: "plx" }.',
    );
    expect(c.warnings).toContain(
      'Role magnitude.B is not assigned: "B", "Bmag" (these columns may carry it equally well). Say it with roles: { "magnitude.B": "B" }.',
    );
    const settled = await readCatalogue(content, {
      roles: { parallax: 'plx', 'magnitude.B': 'B', 'magnitude.V': 'm' },
    });
    expect(settled.roles).toEqual({ rightAscension: 'ra', parallax: 'plx', 'magnitude.B': 'B', 'magnitude.V': 'm' });
    expect(settled.warnings.filter((w) => w.startsWith('Role'))).toEqual([]);
    expect(settled.columns.find((x) => x.name === 'm')?.unit).toBe('mag');
    const moved = await readCatalogue(bytes('ra,dec\n1,2\n'), { roles: { declination: 'ra' } });
    expect(moved.roles).toEqual({ declination: 'ra' });
  });

  it('says which errors are missing, and which units were taken for granted', async () => {
    const c = await readCatalogue(bytes('ra,dec,plx,e_plx,V,teff [K]\n1,2,3,0.1,5,6000\n'));
    expect(c.warnings).toEqual([
      `No error column for magnitude.V: name it with roles: { "magnitude.V.error": '...' } if there is one.`,
    ]);
    expect(c.history[0].note).toBe(
      "no unit given, taken as Coeval's own: ra (deg), dec (deg), plx (mas), e_plx (mas), V (mag)",
    );
    expect(c.columns.map((x) => x.unit)).toEqual(['deg', 'deg', 'mas', 'mas', 'mag', 'K']);
  });

  it('converts role columns to the units inside, exactly where the factor is whole', async () => {
    const c = await readCatalogue(bytes('ra,dec,ra_error,parallax,pmra,rv,V\n1.5,-30,0.1,0.02,0.001,1000,1234\n'), {
      units: {
        ra: 'hourangle',
        dec: 'arcmin',
        ra_error: 'arcsec',
        parallax: 'arcsec',
        pmra: 'arcsec/yr',
        rv: 'm/s',
        V: 'mmag',
      },
    });
    expect([...c.columns].map((x) => c.numbers(x.name)[0])).toEqual([22.5, -0.5, 100, 20, 1, 1, 1.234]);
    expect(c.columns.map((x) => x.unit)).toEqual(['deg', 'deg', 'mas', 'mas', 'mas/yr', 'km/s', 'mag']);
    expect(c.history[0].note).toContain('ra from hourangle to deg, dec from arcmin to deg');
  });
});
