import { mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import { describe, expect, it, vi } from 'vitest';
import { build, bundleForBrowser } from '../../kernel-lib/commands/build.mjs';
import { inRoot } from '../../kernel-lib/commands/paths.mjs';
import { filesBelow, hashOf, isStamped, stamp } from '../../kernel-lib/commands/stamp.mjs';
import { scratchFolder } from './scratch';

const scratch = scratchFolder();

const write = (name: string, text: string) => {
  writeFileSync(join(scratch, name), text);
  return join(scratch, name);
};

describe('bundleForBrowser', () => {
  it('puts the stand-in in the place of the file that opens paths', async () => {
    write(
      'files.ts',
      "import { readFileSync } from 'node:fs'; export const read = (p: string) => readFileSync(p, 'utf8');",
    );
    write('files-browser.ts', "export const read = (p: string) => 'no file ' + p;");
    const entry = write('reader.ts', "import { read } from './files'; export const answer = read('a.csv');");
    const outfile = join(scratch, 'reader.mjs');
    await bundleForBrowser(entry, outfile);
    expect((await import(pathToFileURL(outfile).href)).answer).toBe('no file a.csv');
  });

  it('fails on an import of Node, naming the file', async () => {
    const silent = vi.spyOn(process.stderr, 'write').mockReturnValue(true);
    const entry = write('uses-node.ts', "import { hostname } from 'node:os'; export const name = hostname();");
    await expect(bundleForBrowser(entry, join(scratch, 'x.mjs'))).rejects.toThrow(/uses-node\.ts imports "node:os"/);
    const bare = write('uses-node-too.ts', "import fs from 'fs'; export const read = fs.readFileSync;");
    await expect(bundleForBrowser(bare, join(scratch, 'y.mjs'))).rejects.toThrow(/"fs"/);
    silent.mockRestore();
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

  it('makes a module for browsers that imports nothing', () => {
    const text = readFileSync(inRoot('kernel-lib', 'dist', 'browser', 'coeval.mjs'), 'utf8');
    expect(text).not.toMatch(/^import\s/m);
    expect(text).not.toMatch(/\brequire\(["']/);
    expect(text).toMatch(/^export \{/m);
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
