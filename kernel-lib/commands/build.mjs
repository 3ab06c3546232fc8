import { spawnSync } from 'node:child_process';
import { existsSync, mkdirSync, readdirSync, readFileSync, renameSync, rmSync } from 'node:fs';
import { basename, dirname, join, relative } from 'node:path';
import { pathToFileURL } from 'node:url';
import { withLock } from './lock.mjs';
import { inRoot, root } from './paths.mjs';
import { filesBelow, hashOf, isStamped, stamp } from './stamp.mjs';

const library = inRoot('kernel-lib');
const dist = join(library, 'dist');
const stampFile = join(dist, '.stamp');

/** A build that failed because of the sources; the tools have already printed where. */
export class BuildError extends Error {}

const sourcesHash = () =>
  hashOf(
    [
      ...filesBelow(library, (name) => /\.(ts|json|css)$/.test(name)),
      inRoot('tsconfig.json'),
      inRoot('package-lock.json'),
      inRoot('kernel-lib', 'commands', 'build.mjs'),
    ],
    root,
  );

// The sources are ES modules and may ask for their own address; in CommonJS that is worked out from __filename.
// Small packages are bundled: as files of their own they cost the kernel 40 ms more at import. arquero is not, so that a table
// made by the library and one made in a cell are of the same class; Plotly is read as a file, never loaded in Node.
const commonJs = {
  bundle: true,
  platform: 'node',
  format: 'cjs',
  target: 'node20',
  external: ['arquero', 'plotly.js-dist-min', 'tslab'],
  sourcemap: true,
  define: { 'import.meta.url': '__moduleAddress' },
  banner: { js: "const __moduleAddress = require('node:url').pathToFileURL(__filename).href;" },
  logLevel: 'warning',
};

/** In a browser bundle `catalogue/files-browser` stands in for the one file that opens paths, and Node is not there. */
const browserRules = {
  name: 'browser-rules',
  setup(build) {
    build.onResolve({ filter: /(^|\/)files(\.ts)?$/ }, (request) => {
      const standIn = join(request.resolveDir, dirname(request.path), 'files-browser.ts');
      return existsSync(standIn) ? { path: standIn } : undefined;
    });
    build.onResolve({ filter: /^node:/ }, (request) => ({
      errors: [{ text: `${relative(root, request.importer)} imports "${request.path}", which no browser has` }],
    }));
  },
};

/** Rooms that need Node or the kernel; all others are pure and run in a browser as well. */
const impureRooms = ['notebook', 'report'];

/**
 * The public face without the rooms that are not pure, so that there is one list of exports and not two.
 * @param {string} index text of index.ts: re-exports, one room's file each
 * @returns TypeScript that re-exports what the pure rooms give
 */
export function browserFace(index) {
  const reExports = index.matchAll(/^export\s+(?:type\s+)?(?:\{[^}]*\}|\*)\s+from\s+'\.\/([^/']+)[^']*';/gm);
  return [...reExports]
    .filter(([, room]) => !impureRooms.includes(room))
    .map(([statement]) => statement)
    .join('\n');
}

/**
 * Bundles for browsers, into one ES module that needs nothing else.
 * @param {string} contents TypeScript to begin with
 * @param {string} folder where its imports start from
 * @param {string} outfile
 * @param {'warning' | 'silent'} [logLevel] what is printed
 * @throws on any import of Node
 */
export async function bundleForBrowser(contents, folder, outfile, logLevel = 'warning') {
  const { build } = await import('esbuild');
  await build({
    stdin: { contents, resolveDir: folder, sourcefile: 'browser.ts', loader: 'ts' },
    outfile,
    bundle: true,
    platform: 'browser',
    format: 'esm',
    target: 'es2022',
    sourcemap: true,
    plugins: [browserRules],
    logLevel,
  });
}

async function bundleForNode(folder) {
  const { build } = await import('esbuild');
  await build({ ...commonJs, entryPoints: [join(library, 'index.ts')], outfile: join(folder, 'index.js') });
  const workers = filesBelow(library, (name) => name.endsWith('.worker.ts'));
  if (workers.length === 0) return;
  const names = Object.fromEntries(workers.map((file) => [basename(file, '.ts'), file]));
  await build({ ...commonJs, entryPoints: names, outdir: folder });
}

/** Writes the declarations; returns what the compiler has to say against them, or null. */
function emitTypes(folder) {
  // Not node_modules/.bin/tsc, which is the older compiler of the kernel.
  const compiler = inRoot('node_modules', 'typescript', 'bin', 'tsc');
  const options = [
    '-p',
    'tsconfig.json',
    '--emitDeclarationOnly',
    '--outDir',
    join(folder, 'types'),
    '--pretty',
    'false',
  ];
  const run = spawnSync(process.execPath, [compiler, ...options], { cwd: root, encoding: 'utf8' });
  return run.status === 0 ? null : `${run.stdout}${run.stderr}`.trimEnd();
}

/** Moves what was built into dist, file by file, so that whoever reads dist meanwhile never finds it empty. */
function moveInto(from, to) {
  mkdirSync(to, { recursive: true });
  for (const entry of readdirSync(from, { withFileTypes: true })) {
    const source = join(from, entry.name);
    const target = join(to, entry.name);
    if (entry.isDirectory()) moveInto(source, target);
    else renameSync(source, target);
  }
}

async function buildAll(say, types) {
  const next = join(dist, `.next-${process.pid}`);
  mkdirSync(next, { recursive: true });
  try {
    say('Bundling the library');
    await bundleForNode(next);
    const face = browserFace(readFileSync(join(library, 'index.ts'), 'utf8'));
    await bundleForBrowser(face, library, join(next, 'browser', 'coeval.mjs'));
    moveInto(next, dist);
    if (!types) return;
    say('Writing the type declarations');
    const errors = emitTypes(next);
    // A type error fails the build, yet what was made is put in place, so that a notebook can be tried meanwhile.
    if (existsSync(join(next, 'types'))) {
      rmSync(join(dist, 'types'), { recursive: true, force: true });
      renameSync(join(next, 'types'), join(dist, 'types'));
    }
    if (errors !== null) throw new BuildError(`the library has type errors:\n${errors}`);
  } finally {
    rmSync(next, { recursive: true, force: true });
  }
}

/**
 * Builds kernel-lib/dist from the sources; does nothing when sources and lock file are those of the last build.
 * @param {object} [options]
 * @param {(line: string) => void} [options.say] receives a line for each step that has to be done
 * @param {boolean} [options.types] write declarations too (default); without them the next build starts again
 * @returns true when something was built
 * @throws BuildError when the sources cannot be bundled or have type errors
 */
export async function build({ say = () => {}, types = true } = {}) {
  const hash = sourcesHash();
  if (isStamped(stampFile, hash)) return false;
  return withLock(join(dist, '.lock'), async () => {
    if (isStamped(stampFile, hash)) return false;
    rmSync(stampFile, { force: true });
    try {
      await buildAll(say, types);
    } catch (error) {
      // esbuild has printed its own messages, with the lines they are about.
      if (Array.isArray(error.errors)) throw new BuildError('the library could not be bundled (see above)');
      throw error;
    }
    if (types) stamp(stampFile, hash);
    return true;
  });
}

if (process.argv[1] && import.meta.url === pathToFileURL(process.argv[1]).href) {
  if (!existsSync(inRoot('node_modules', 'esbuild'))) {
    console.error('build: the node packages are not installed yet. Run `npm ci` first (`npm start` does it too).');
    process.exit(1);
  }
  try {
    const built = await build({ say: (line) => console.log(line), types: !process.argv.includes('--no-types') });
    console.log(built ? 'Built kernel-lib/dist.' : 'kernel-lib/dist is up to date.');
  } catch (error) {
    if (!(error instanceof BuildError)) throw error;
    console.error(`build: ${error.message}`);
    process.exit(1);
  }
}
