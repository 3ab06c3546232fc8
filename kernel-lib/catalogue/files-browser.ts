/** Stands in for `files.ts` in bundles for a page, where no path can be opened. Same exports. */

export async function readFileBytes(caller: string, path: string): Promise<Uint8Array> {
  throw new Error(
    `${caller}: a page cannot open the path "${path}". Pass the file's bytes (Uint8Array or ArrayBuffer).`,
  );
}

export async function writeFileBytes(
  caller: string,
  path: string,
  _parts: Iterable<Uint8Array>,
  _overwrite: boolean,
): Promise<void> {
  throw new Error(`${caller}: a page cannot write to the path "${path}".`);
}

export function fileTitle(path: string): string {
  return path.split('/').at(-1) ?? path;
}
