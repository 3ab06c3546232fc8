import { createHash } from 'node:crypto';
import { existsSync, mkdirSync, readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { dirname, join, relative } from 'node:path';

/** Every file below `folder` for which `wanted(name)` holds, sorted; skips built and installed folders. */
export function filesBelow(folder, wanted, skip = ['node_modules', 'dist']) {
  const found = [];
  const visit = (directory) => {
    for (const entry of readdirSync(directory, { withFileTypes: true })) {
      if (entry.isDirectory()) {
        if (!skip.includes(entry.name)) visit(join(directory, entry.name));
      } else if (wanted(entry.name)) found.push(join(directory, entry.name));
    }
  };
  if (existsSync(folder)) visit(folder);
  return found.sort();
}

/** Hash over the names (relative to `base`) and contents of files, and over any further text. */
export function hashOf(files, base, ...texts) {
  const hash = createHash('sha256');
  for (const file of files) {
    hash.update(relative(base, file)).update('\0');
    if (existsSync(file)) hash.update(readFileSync(file));
    hash.update('\0');
  }
  for (const text of texts) hash.update(text).update('\0');
  return hash.digest('hex');
}

/** True when the stamp file holds exactly this text. */
export const isStamped = (file, text) => existsSync(file) && readFileSync(file, 'utf8') === text;

/** Writes the stamp; done last, so that an interrupted step is done again. */
export function stamp(file, text) {
  mkdirSync(dirname(file), { recursive: true });
  writeFileSync(file, text);
}
