/**
 * Notebooks of an analysis, cell by cell, as nbformat 4.5 JSON. The flagship notebook and those for a user's own catalogue
 * come from here, so both read the same.
 */

/** What an analysis needs of a catalogue, apart from photometry, each with what it is. */
const needed = {
  properMotionRa: 'proper motion in right ascension, cos(declination) included, mas/yr',
  'properMotionRa.error': 'its error, mas/yr',
  properMotionDec: 'proper motion in declination, mas/yr',
  'properMotionDec.error': 'its error, mas/yr',
  parallax: 'parallax, mas',
  'parallax.error': 'its error, mas',
};

/** Photometry an age can be had from, best first: colour, magnitude, and the other ways to have the colour. */
const photometries = [
  { colour: 'BP-RP', magnitude: 'G', parts: ['BP', 'RP'] },
  { colour: 'B-V', magnitude: 'V', parts: ['B', 'V'] },
];

const has = (roles, role) => roles[role] !== undefined;

const hasColour = (roles, { colour, parts }) =>
  has(roles, `colour.${colour}`) || parts.every((band) => has(roles, `magnitude.${band}`));

/** How much of a photometry is there, for choosing what to ask for when none is complete. */
const completeness = (roles, { magnitude, parts }) =>
  [...new Set([magnitude, ...parts])].filter((band) => has(roles, `magnitude.${band}`)).length;

/**
 * The photometry that the analysis will use.
 * @param roles role to column
 * @returns an object { colour, magnitude, parts }; the first complete one, else the one of which most is there
 */
export function choosePhotometry(roles) {
  const complete = photometries.find((one) => has(roles, `magnitude.${one.magnitude}`) && hasColour(roles, one));
  if (complete) return complete;
  return photometries.toSorted((a, b) => completeness(roles, b) - completeness(roles, a))[0];
}

/**
 * Roles without which the analysis cannot go on and which no column is known to have.
 * @param roles role to column
 * @returns [role, what it is] of each
 */
export function openRoles(roles) {
  const open = Object.entries(needed).filter(([role]) => !has(roles, role));
  const photometry = choosePhotometry(roles);
  const bands = hasColour(roles, photometry) ? [photometry.magnitude] : [photometry.magnitude, ...photometry.parts];
  const missing = [...new Set(bands)].filter((band) => !has(roles, `magnitude.${band}`));
  return [...open, ...missing.map((band) => [`magnitude.${band}`, `magnitude in ${band}`])];
}

const quote = (text) => `'${String(text).replace(/[\\']/g, '\\$&').replace(/\n/g, '\\n').replace(/\r/g, '\\r')}'`;
const key = (role) => (/^[A-Za-z_$][\w$]*$/.test(role) ? role : quote(role));
// A column's name may hold anything; in a comment it must not end the line.
const oneLine = (text) => String(text).replace(/[\p{Cc}\p{Zl}\p{Zp}]+/gu, ' ');
const inMarkdown = (text) => oneLine(text).replace(/[\\`*_{}[\]<>#|]/g, '\\$&');

const markdown = (...lines) => ({ type: 'markdown', source: lines.join('\n') });
const code = (...lines) => ({ type: 'code', source: lines.flat().join('\n') });

/** The cell that reads the catalogue, recognised columns filled in, the others marked CHOOSE. */
function readingCell({ source, roles, columns, warnings }) {
  const open = openRoles(roles);
  if (columns === null) return code(`const field = await readCatalogue(${quote(source)});`, 'field');
  const free = columns.filter((name) => !Object.values(roles).includes(name)).map(oneLine);
  const lines = [
    'const roles = {',
    ...Object.entries(roles).map(([role, column]) => `  ${key(role)}: ${quote(column)},`),
  ];
  for (const [role, what] of open) {
    lines.push(
      `  // CHOOSE the column that holds the ${what.replace(/^its error/, `error of ${role.replace('.error', '')}`)}`,
    );
    lines.push(`  ${key(role)}: '',`);
  }
  lines.push('};');
  if (open.length > 0) {
    const shown = free.length > 40 ? [...free.slice(0, 40), '...'] : free;
    lines.push(`// Columns that have no role yet: ${shown.join(', ') || 'none'}`);
    lines.push("const unchosen = Object.entries(roles).filter(([, column]) => column === '').map(([role]) => role);");
    lines.push('if (unchosen.length > 0) {');
    lines.push("  const list = unchosen.join(', ');");
    lines.push(
      "  throw new Error('Choose the columns of ' + list + ' (marked CHOOSE in this cell), then run again.');",
    );
    lines.push('}');
  }
  for (const warning of warnings) lines.push(`// Look at this: ${oneLine(warning)}`);
  return code(lines, `const field = await readCatalogue(${quote(source)}, { roles });`, 'field');
}

/** What the notebook imports, as an import statement of lines that fit a cell. */
const imports = [
  'import {',
  '  readCatalogue, hasBands, findMembers, clusterDistance, estimateReddening, physicalProperties,',
  '  ridgeLine, turnoffPoint, turnoffAge, isochrone, isochroneTurnoff, clusterSummary,',
  '  properMotionDiagram, parallaxHistogram, skyMap, colourMagnitudeDiagram, hrDiagram,',
  "} from 'coeval';",
];

/** The cells of the analysis, in order. */
function cellsFor(settings) {
  const { title, introduction, roles, metallicity } = settings;
  const { colour, magnitude, parts } = choosePhotometry(roles);
  const cut = has(roles, `colour.${colour}`) ? [] : parts;
  const bands = [...new Set([magnitude, ...cut])];
  const sky = has(roles, 'rightAscension') && has(roles, 'declination');
  return [
    markdown(`# ${inMarkdown(title)}`, '', introduction),
    code(imports),
    markdown('## The catalogue', '', 'What was read: units, ranges, missing values, and which column has which role.'),
    readingCell(settings),
    markdown(
      '## Stars with usable photometry',
      '',
      'A cut is kept in the history of the catalogue, with the rows before and after.',
    ),
    code(`const usable = field.keep(hasBands(${bands.map(quote).join(', ')}));`, 'usable'),
    markdown(
      '## Members',
      '',
      'Cluster and field as a mixture in proper motion and parallax, every star with its own errors.',
    ),
    code('const members = findMembers(usable);', 'members'),
    code('properMotionDiagram(usable, { probability: members.probability })'),
    ...(sky ? [code('skyMap(usable, { probability: members.probability })')] : []),
    code(
      '// Stars more likely members than not. Raise the limit for a purer, smaller sample.',
      'const cluster = members.select(0.5);',
      'cluster',
    ),
    markdown('## Distance', '', 'From the parallaxes of the members, with a spread of their own beside the errors.'),
    code('const distance = clusterDistance(cluster);', 'distance'),
    code('parallaxHistogram(usable, { probability: members.probability, parallax: distance.parallax })'),
    markdown(
      '## Reddening',
      '',
      'From the unevolved main sequence. Put a value of the literature in its place if there is a better one.',
    ),
    code(
      '// [Fe/H] in dex: assumed here, not measured.',
      `const metallicity = ${metallicity};`,
      `const diagram = { colour: '${colour}', magnitude: '${magnitude}' } as const;`,
      'const reddening = estimateReddening(cluster, { ...diagram, distanceModulus: distance.modulus, metallicity });',
      'reddening',
    ),
    markdown(
      '## Turnoff and age',
      '',
      'The ridge line and its bluest point are what the eye sees. The age comes from every star about the turnoff, single or',
      'binary, against the sequences of all ages; the errors of distance and reddening are carried through.',
    ),
    code(
      'const place = { ...diagram, distanceModulus: distance.modulus, ebv: reddening, metallicity };',
      'const ridge = ridgeLine(cluster, diagram);',
      'const turnoff = turnoffPoint(cluster, place);',
      'turnoff',
    ),
    code('const age = turnoffAge(cluster, place);', 'age'),
    markdown(
      '## Colour-magnitude diagram',
      '',
      'As observed, with the ridge line and the isochrone of the age found, reddened and moved to the cluster.',
    ),
    code(
      `const curve = isochrone({ logAge: age.logAge.value, metallicity, bands: [${[...new Set([...parts, magnitude])].map(quote).join(', ')}] });`,
      'colourMagnitudeDiagram(cluster, {',
      '  ...diagram, modulus: distance.modulus, ebv: reddening, isochrones: [curve], ridge,',
      '  turnoff: { colour: turnoff.observedColour, magnitude: turnoff.observedMagnitude },',
      '})',
    ),
    markdown(
      '## HR diagram',
      '',
      'Luminosity and temperature of every member, with the zero-age main sequence and lines of equal radius.',
    ),
    code(
      'const stars = physicalProperties(cluster, { ...diagram, distance: distance.distance, ebv: reddening, metallicity });',
      'const { logTeff, logL } = isochroneTurnoff(curve, diagram);',
      'hrDiagram(stars, { isochrones: [curve], metallicity, turnoff: { logTeff, logL } })',
    ),
    markdown('## Result'),
    code(`clusterSummary({ name: ${quote(title)}, members, distance, reddening, age, metallicity })`),
  ];
}

const defaultIntroduction =
  'From the field catalogue to the age of the cluster. Every step can be changed; run the cells below it again then.';

const toCell = ({ type, source }, index) => ({
  cell_type: type,
  id: `coeval-${String(index + 1).padStart(2, '0')}`,
  metadata: {},
  source: source.split('\n').map((line, i, all) => (i < all.length - 1 ? `${line}\n` : line)),
  ...(type === 'code' ? { execution_count: null, outputs: [] } : {}),
});

/**
 * A notebook of the whole way from a field catalogue to an age.
 * @param {object} settings
 * @param {string} settings.title heading, also the name of the cluster in the result
 * @param {string} settings.source path of the catalogue as the notebook's cells name it
 * @param {string} [settings.introduction] markdown under the heading
 * @param {Record<string, string>} [settings.roles] role to column, as recognised
 * @param {string[] | null} [settings.columns] every column of the catalogue; null (default) when the file says all by itself
 *   and no roles are to be listed
 * @param {string[]} [settings.warnings] what the reader found odd, a sentence each
 * @param {number} [settings.metallicity] [Fe/H], dex; default 0
 * @returns nbformat 4.5 JSON without outputs
 * @example notebookFor({ title: 'My cluster', source: 'field.csv', roles: { parallax: 'plx' }, columns: ['plx', 'g'] })
 */
export function notebookFor(settings) {
  const { title, source, introduction = defaultIntroduction, roles = {}, columns = null } = settings;
  const { warnings = [], metallicity = 0 } = settings;
  const cells = cellsFor({ title, source, introduction, roles, columns, warnings, metallicity });
  return {
    cells: cells.map(toCell),
    metadata: {
      kernelspec: { display_name: 'TypeScript (tslab)', language: 'typescript', name: 'tslab' },
      language_info: { file_extension: '.ts', mimetype: 'text/typescript', name: 'typescript' },
    },
    nbformat: 4,
    nbformat_minor: 5,
  };
}
