import { spawn } from 'node:child_process';
import { existsSync, lstatSync, mkdirSync, readFileSync, realpathSync, symlinkSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { CellFailure, executeNotebook } from '../../kernel-lib/commands/execute.mjs';
import { linkLibrary } from '../../kernel-lib/commands/link-library.mjs';
import { resultLine } from '../../kernel-lib/commands/notebook-outputs.mjs';
import { inRoot } from '../../kernel-lib/commands/paths.mjs';
import { notebookOf, recordedProgress, scratchFolder } from './scratch';

// Every test here starts the real kernel.
const scratch = scratchFolder();

function saved(name: string, ...sources: string[]) {
  const path = join(scratch, name);
  writeFileSync(path, JSON.stringify(notebookOf(...sources)));
  return path;
}

describe('executeNotebook', () => {
  it('tells how far it is, saves the outputs and finds the result', async () => {
    const source = saved(
      'good.ipynb',
      '# A field',
      'const a = 40',
      '## Its age',
      "console.log('Result: ' + (a + 2))",
      'a',
    );
    const output = join(scratch, 'out', 'good.ipynb');
    const progress = recordedProgress();
    const { notebook } = await executeNotebook(source, output, { progress, isTerminal: false });
    expect(progress.lines).toEqual(['cell 1 of 3: A field', 'cell 2 of 3: Its age']);
    expect(resultLine(notebook)).toBe('Result: 42');
    expect(JSON.parse(readFileSync(output, 'utf8'))).toEqual(notebook);
    // The source stays as it was, and no half-written file is left.
    expect(JSON.parse(readFileSync(source, 'utf8')).cells[3].outputs).toEqual([]);
    expect(existsSync(`${output}.tmp`)).toBe(false);
  });

  it('says which cell failed and why, and keeps what ran before it', async () => {
    const source = saved(
      'bad.ipynb',
      '# A field',
      "console.log('read')",
      '## Members',
      "throw new RangeError('3 stars')",
      '1',
    );
    const output = join(scratch, 'out', 'bad.ipynb');
    const failure = await executeNotebook(source, output, { progress: recordedProgress() }).catch((error) => error);
    expect(failure).toBeInstanceOf(CellFailure);
    expect(failure).toMatchObject({ number: 2, heading: 'Members', reason: 'RangeError: 3 stars', output });
    const { cells } = JSON.parse(readFileSync(output, 'utf8'));
    expect(JSON.stringify(cells[1].outputs)).toContain('read');
    expect(cells[4].outputs).toEqual([]);
  });

  it('says so when the kernel dies', async () => {
    const source = saved('dead.ipynb', '# A field', 'process.exit(3)');
    const output = join(scratch, 'out', 'dead.ipynb');
    await expect(executeNotebook(source, output, { progress: recordedProgress() })).rejects.toThrow(
      /ended early in cell 1 \(A field\): the kernel died/,
    );
  });
});

describe('an interrupted run', () => {
  const script = `
    import { executeNotebook } from ${JSON.stringify(inRoot('kernel-lib', 'commands', 'execute.mjs'))};
    const [source, output] = process.argv.slice(1);
    const progress = { line: (text) => console.log(text), update() {}, end() {} };
    await executeNotebook(source, output, { progress, isTerminal: false }).catch((error) => console.log(error.message));
  `;

  it('ends its kernel, says where it was and keeps what ran', async () => {
    const source = saved(
      'long.ipynb',
      '# Read',
      "console.log('read')",
      '# Wait',
      'await new Promise((r) => setTimeout(r, 1e6))',
    );
    const output = join(scratch, 'out', 'long.ipynb');
    const child = spawn(process.execPath, ['--input-type=module', '-e', script, source, output]);
    let said = '';
    let asked = false;
    child.stdout.on('data', (data) => {
      said += data;
      if (!asked && said.includes('cell 2 of 2')) asked = child.kill('SIGINT');
    });
    expect(await new Promise((resolve) => child.on('close', resolve))).toBe(0);
    expect(said).toContain(`the run ended early in cell 2 (Wait): interrupted. What was done is in ${output}`);
    expect(JSON.stringify(JSON.parse(readFileSync(output, 'utf8')).cells[1].outputs)).toContain('read');
  });
});

describe('linkLibrary', () => {
  it('lets a notebook in any folder import the library, with types that can be named', async () => {
    const folder = join(scratch, 'far');
    mkdirSync(folder);
    expect(linkLibrary(folder)).toEqual([expect.stringContaining(join(folder, 'node_modules', 'coeval'))]);
    expect(realpathSync(join(folder, 'node_modules', 'coeval'))).toBe(realpathSync(inRoot('kernel-lib')));
    // Exported, as every variable of a cell is; `table` has a type of a package the library depends on.
    const source = saved(
      'far/use.ipynb',
      "import { Catalogue } from 'coeval';",
      "const field = new Catalogue({ source: 'x', rowCount: 2, columns: [{ name: 'a', values: new Float64Array([1, 2]) }] });",
      "const table = field.table;\nconsole.log('Result: ' + table.numRows());",
    );
    const { notebook } = await executeNotebook(source, source, { progress: recordedProgress() });
    expect(resultLine(notebook)).toBe('Result: 2');
    // The second time there is nothing to do.
    expect(linkLibrary(folder)).toEqual([]);
  });

  it('mends a link that leads nowhere, and leaves another copy alone but names it', () => {
    const folder = join(scratch, 'moved');
    mkdirSync(join(folder, 'node_modules'), { recursive: true });
    symlinkSync(join(scratch, 'gone'), join(folder, 'node_modules', 'coeval'));
    linkLibrary(folder);
    expect(existsSync(join(folder, 'node_modules', 'coeval', 'package.json'))).toBe(true);

    const other = join(scratch, 'other', 'node_modules', 'coeval');
    mkdirSync(other, { recursive: true });
    writeFileSync(join(other, 'package.json'), '{"name":"coeval","version":"9.9.9"}');
    const lines = linkLibrary(join(scratch, 'other'));
    expect(lines.join()).toContain(`use the coeval of ${realpathSync(other)}`);
    expect(lstatSync(other).isSymbolicLink()).toBe(false);
  });
});
