import { existsSync, lstatSync, mkdirSync, realpathSync, rmSync, symlinkSync } from 'node:fs';
import { createRequire } from 'node:module';
import { dirname, join } from 'node:path';
import { cannotWrite } from './new-notebook.mjs';
import { inRoot } from './paths.mjs';

const packages = () => ({
  coeval: inRoot('kernel-lib'),
  // Types of a cell's variables may come from arquero, and the compiler must then be able to name it from that folder.
  arquero: dirname(createRequire(inRoot('kernel-lib', 'package.json')).resolve('arquero/package.json')),
});

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
 * Makes `import ... from 'coeval'` work in notebooks of a folder, by links in a node_modules beside them.
 * @returns lines to tell the user; empty when there was nothing to do
 */
export function linkLibrary(folder) {
  const lines = [];
  for (const [name, target] of Object.entries(packages())) {
    const present = found(folder, name);
    if (present !== null) {
      if (name === 'coeval' && present !== realpathSync(target))
        lines.push(`Notebooks in ${folder} use the coeval of ${present}.`);
      continue;
    }
    const place = join(folder, 'node_modules', name);
    try {
      mkdirSync(dirname(place), { recursive: true });
      removeDeadLink(place);
      symlinkSync(target, place, 'dir');
    } catch (error) {
      throw cannotWrite(error, folder);
    }
    if (name === 'coeval')
      lines.push(`Linked ${place} to this library, so that notebooks in that folder can import it.`);
  }
  return lines;
}
