import { mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import { describe, expect, it } from 'vitest';
import { browserFace, build, bundleForBrowser } from '../../kernel-lib/commands/build.mjs';
import { inRoot } from '../../kernel-lib/commands/paths.mjs';
import { filesBelow, hashOf, isStamped, stamp } from '../../kernel-lib/commands/stamp.mjs';
import { scratchFolder } from './scratch';

const scratch = scratchFolder();

const write = (name: string, text: string) => {
  writeFileSync(join(scratch, name), text);
  return join(scratch, name);
};

const bundle = (contents: string, name: string) => bundleForBrowser(contents, scratch, join(scratch, name), 'silent');

describe('bundleForBrowser', () => {
  it('puts the stand-in in the place of the file that opens paths', async () => {
    write(
      'files.ts',
      "import { readFileSync } from 'node:fs'; export const read = (p: string) => readFileSync(p, 'utf8');",
    );
    write('files-browser.ts', "export const read = (p: string) => 'no file ' + p;");
    await bundle("import { read } from './files'; export const answer = read('a.csv');", 'reader.mjs');
    expect((await import(pathToFileURL(join(scratch, 'reader.mjs')).href)).answer).toBe('no file a.csv');
  });

  it('fails on an import of Node, naming the file', async () => {
    write('uses-node.ts', "import { hostname } from 'node:os'; export const name = hostname();");
    write('uses-node-too.ts', "import fs from 'fs'; export const read = fs.readFileSync;");
    await expect(bundle("export * from './uses-node'", 'x.mjs')).rejects.toThrow(/uses-node\.ts imports "node:os"/);
    await expect(bundle("export * from './uses-node-too'", 'y.mjs')).rejects.toThrow(/"fs"/);
  });
});

describe('browserFace', () => {
  it('keeps what pure rooms export and nothing of the others', () => {
    const index = [
      "import './notebook/install';",
      "export { type Measured, measured } from './quantity/measured';",
      "export {\n  a,\n  b,\n} from './catalogue/read/c';",
      "export type { Provenance } from './report/provenance';",
      "export { show } from './notebook/display';",
      "export * from './models';",
    ].join('\n');
    expect(browserFace(index).split('\n')).toEqual([
      "export { type Measured, measured } from './quantity/measured';",
      'export {',
      '  a,',
      '  b,',
      "} from './catalogue/read/c';",
      "export * from './models';",
    ]);
  });
});

describe('build', () => {
  it('does nothing when the sources are those of the last build', async () => {
    await build();
    const stampText = readFileSync(inRoot('kernel-lib', 'dist', '.stamp'), 'utf8');
    const said: string[] = [];
    expect(await build({ say: (line) => said.push(line) })).toBe(false);
    expect(said).toEqual([]);
    expect(readFileSync(inRoot('kernel-lib', 'dist', '.stamp'), 'utf8')).toBe(stampText);
  });

  it('makes a module for browsers that imports nothing and works', async () => {
    const file = inRoot('kernel-lib', 'dist', 'browser', 'coeval.mjs');
    const text = readFileSync(file, 'utf8');
    expect(text).not.toMatch(/^import\s/m);
    expect(text).not.toMatch(/\brequire\(["']/);
    const coeval = await import(pathToFileURL(file).href);
    expect(String(coeval.measured(1, 0.9, 1.1, 'mag'))).toBe('1.00 ± 0.10 mag');
  });
});

describe('stamps', () => {
  it('change with a name, a content or a file more, and skip what is built or installed', () => {
    const folder = join(scratch, 'tree');
    mkdirSync(join(folder, 'dist'), { recursive: true });
    writeFileSync(join(folder, 'a.ts'), '1');
    writeFileSync(join(folder, 'dist', 'b.ts'), '1');
    const files = () => filesBelow(folder, (name: string) => name.endsWith('.ts'));
    const first = hashOf(files(), folder);
    expect(files()).toEqual([join(folder, 'a.ts')]);
    writeFileSync(join(folder, 'a.ts'), '2');
    const second = hashOf(files(), folder);
    writeFileSync(join(folder, 'c.ts'), '');
    const third = hashOf(files(), folder);
    expect(new Set([first, second, third]).size).toBe(3);
    const file = join(folder, 'deep', 'stamp');
    expect(isStamped(file, first)).toBe(false);
    stamp(file, first);
    expect(isStamped(file, first)).toBe(true);
    expect(isStamped(file, second)).toBe(false);
  });
});
