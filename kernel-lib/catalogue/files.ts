import { constants } from 'node:fs';
import { open, readdir } from 'node:fs/promises';
import { basename, dirname, resolve } from 'node:path';
import { nearest } from '../quantity/options';

/** The one file of the pure rooms that opens a path; `files-browser.ts` stands in for it in bundles. */

/** Most bytes that one call of the system reads. */
const PART = 1 << 28;

/**
 * The bytes of a file.
 * @throws Error that shows the full path and a file of nearly that name
 */
export async function readFileBytes(caller: string, path: string): Promise<Uint8Array> {
  let file: Awaited<ReturnType<typeof open>>;
  try {
    file = await open(path, 'r');
  } catch (error) {
    throw new Error(await openMessage(caller, path, error as NodeJS.ErrnoException));
  }
  try {
    const stat = await file.stat();
    if (stat.isDirectory()) throw new Error(`${caller}: ${resolve(path)} is a folder, not a file.`);
    let bytes = new Uint8Array(stat.size);
    let at = 0;
    for (;;) {
      if (at === bytes.length) {
        // Pipes and growing files have no size to trust.
        if (stat.isFile()) break;
        const grown = new Uint8Array(Math.max(1 << 16, 2 * bytes.length));
        grown.set(bytes);
        bytes = grown;
      }
      const { bytesRead } = await file.read(bytes, at, Math.min(PART, bytes.length - at), null);
      if (bytesRead === 0) break;
      at += bytesRead;
    }
    return bytes.subarray(0, at);
  } finally {
    await file.close();
  }
}

/**
 * Writes a file.
 * @param overwrite whether an existing file may be replaced
 * @throws Error when the file exists and may not be replaced, or cannot be written
 */
export async function writeFileBytes(
  caller: string,
  path: string,
  parts: Iterable<Uint8Array>,
  overwrite: boolean,
): Promise<void> {
  const mode = constants.O_WRONLY | constants.O_CREAT | (overwrite ? constants.O_TRUNC : constants.O_EXCL);
  let file: Awaited<ReturnType<typeof open>>;
  try {
    file = await open(path, mode);
  } catch (error) {
    const code = (error as NodeJS.ErrnoException).code;
    if (code === 'EEXIST') {
      throw new Error(`${caller}: ${resolve(path)} exists. Choose another name, or pass overwrite: true.`);
    }
    if (code === 'ENOENT') throw new Error(`${caller}: the folder ${dirname(resolve(path))} does not exist.`);
    throw new Error(`${caller}: ${resolve(path)} cannot be written (${code ?? (error as Error).message}).`);
  }
  try {
    for (const part of parts) {
      let at = 0;
      while (at < part.length) at += (await file.write(part, at)).bytesWritten;
    }
  } finally {
    await file.close();
  }
}

/** Name of a file without its folders, as messages and titles show it. */
export function fileTitle(path: string): string {
  return basename(path);
}

async function openMessage(caller: string, path: string, error: NodeJS.ErrnoException): Promise<string> {
  const full = resolve(path);
  if (error.code === 'EISDIR') return `${caller}: ${full} is a folder, not a file.`;
  if (error.code !== 'ENOENT') return `${caller}: ${full} cannot be opened (${error.code ?? error.message}).`;
  const names = await readdir(dirname(full)).catch(() => null);
  if (names === null) return `${caller}: the folder ${dirname(full)} does not exist.`;
  const near = nearest(basename(full), names);
  return `${caller}: there is no file ${full}.${near ? ` Did you mean "${near}"?` : ''}`;
}
