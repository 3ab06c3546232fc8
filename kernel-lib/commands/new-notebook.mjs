import { existsSync, statSync, writeFileSync } from 'node:fs';
import { basename, dirname, join, resolve } from 'node:path';
import { Problem } from './problem.mjs';

/** Name of a catalogue without its endings: "NGC 1.tsv.gz" -> "NGC 1". */
export const stemOf = (path) =>
  basename(path)
    .replace(/\.gz$/i, '')
    .replace(/\.[A-Za-z0-9]{1,5}$/, '') || basename(path);

/**
 * Full path of a catalogue the user named, checked to be a file.
 * @param base folder that a relative path starts from
 * @throws Problem when it is not there or is a folder or a notebook
 */
export function catalogueFile(path, base) {
  const full = resolve(base, path);
  if (!existsSync(full)) throw new Problem(`there is no file ${full}.`);
  if (!statSync(full).isFile())
    throw new Problem(`${full} is a folder; give the catalogue itself, a CSV, TSV or ECSV file.`);
  if (/\.(ipynb|html?)$/i.test(full)) throw new Problem(`${full} is not a catalogue; give a CSV, TSV or ECSV file.`);
  return full;
}

/** What to tell when a file could not be made in a folder. */
export function cannotWrite(error, folder) {
  const reasons = {
    EACCES: 'it is not yours to write in',
    EPERM: 'it is not yours to write in',
    EROFS: 'it is read-only',
  };
  const reason = reasons[error.code] ?? (error.code === 'ENOSPC' ? 'the disk is full' : error.message);
  return new Problem(
    `nothing can be written to ${folder}: ${reason}. Copy the catalogue to a folder of yours and name it there.`,
  );
}

/**
 * Writes a new notebook beside the catalogue under the first free name: stem, stem-2, stem-3 ... A name counts as taken when
 * there is a notebook or a report of that name.
 * @returns an object { notebook, report } full paths; the report is not made here
 */
export function writeNewNotebook(catalogue, content) {
  const folder = dirname(catalogue);
  for (let count = 1; ; count++) {
    const name = join(folder, count === 1 ? stemOf(catalogue) : `${stemOf(catalogue)}-${count}`);
    const paths = { notebook: `${name}.ipynb`, report: `${name}.html` };
    if (existsSync(paths.report)) continue;
    try {
      // "wx" fails on a file that is there, whoever made it and however short ago.
      writeFileSync(paths.notebook, `${JSON.stringify(content, null, 1)}\n`, { flag: 'wx' });
      return paths;
    } catch (error) {
      if (error.code !== 'EEXIST') throw cannotWrite(error, folder);
    }
  }
}
