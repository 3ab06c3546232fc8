import util from 'node:util';
import { Problem } from './problem.mjs';

export const help = `Coeval: from a field catalogue to the age of a star cluster, in a notebook.

  npm start                            run the flagship notebook on an invented cluster, then open JupyterLab
  npm start -- path/to/catalogue.csv   make a notebook for your own catalogue beside it, run it, open it
  npm start -- --no-lab                stop before JupyterLab
  npm start -- --help                  this text

The first run installs what is needed into this folder (node_modules, .venv) and takes a few minutes; later runs start at once.
A catalogue is CSV, TSV or ECSV, plain or gzipped, one star a row. Columns are recognised by their UCDs and names; what is not
recognised is left in the notebook as a line marked CHOOSE. No file of yours is ever overwritten.
`;

const options = { 'no-lab': { type: 'boolean' }, help: { type: 'boolean', short: 'h' } };
const listed = Object.keys(options)
  .map((name) => `--${name}`)
  .join(', ');

/**
 * Reads the command line of `npm start`.
 * @param words after `npm start --`
 * @returns an object { help, lab, catalogue } with catalogue null when none was given
 * @throws Problem on an unknown option or more than one catalogue
 */
export function readArguments(words) {
  const { tokens } = util.parseArgs({ args: words, options, strict: false, allowPositionals: true, tokens: true });
  const paths = [];
  const given = new Set();
  for (const token of tokens) {
    if (token.kind === 'positional') paths.push(token.value);
    if (token.kind !== 'option') continue;
    if (!Object.hasOwn(options, token.name)) {
      throw new Problem(`unknown option ${token.rawName}. Known are ${listed}; a catalogue is given as a plain path.`);
    }
    if (token.value !== undefined) throw new Problem(`${token.rawName} takes no value, got "${token.value}".`);
    given.add(token.name);
  }
  if (paths.length > 1) {
    throw new Problem(
      `one catalogue at a time, got ${paths.length}: ${paths.join(', ')}. Quote a path that has spaces.`,
    );
  }
  return { help: given.has('help'), lab: !given.has('no-lab'), catalogue: paths[0] ?? null };
}
