import { existsSync, lstatSync, mkdirSync, realpathSync, rmSync, symlinkSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { cannotWrite } from './new-notebook.mjs';
import { inRoot } from './paths.mjs';

/** Folder of the package that an import in `folder` would find, or null. Looked up by folders, as a compiler does. */
function found(folder, name) {
  for (let at = folder; ; at = dirname(at)) {
    const place = join(at, 'node_modules', name);
    if (existsSync(join(place, 'package.json'))) return realpathSync(place);
    if (dirname(at) === at) return null;
  }
}

/** A link left by a copy of the project that has since moved points nowhere. */
function removeDeadLink(place) {
  const isLink = lstatSync(place, { throwIfNoEntry: false })?.isSymbolicLink();
  if (isLink && !existsSync(place)) rmSync(place);
}

/**
 * Makes `import ... from 'coeval'` work in notebooks of a folder, by a link in a node_modules beside them.
 * @returns lines to tell the user; empty when there was nothing to do
 */
export function linkLibrary(folder) {
  const library = realpathSync(inRoot('kernel-lib'));
  const present = found(folder, 'coeval');
  if (present === library) return [];
  if (present !== null) return [`Notebooks in ${folder} use the coeval of ${present}.`];
  const place = join(folder, 'node_modules', 'coeval');
  try {
    mkdirSync(dirname(place), { recursive: true });
    removeDeadLink(place);
    symlinkSync(library, place, 'dir');
  } catch (error) {
    throw cannotWrite(error, folder);
  }
  return [`Linked ${place} to this library, so that notebooks in that folder can import it.`];
}
