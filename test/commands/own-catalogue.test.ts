import { execFile } from 'node:child_process';
import { existsSync, mkdirSync, readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { inRoot } from '../../kernel-lib/commands/paths.mjs';
import { scratchFolder } from './scratch';

const scratch = scratchFolder();

/** `npm start -- --no-lab ...` as a user would say it, standing in `folder`. */
function start(folder: string, ...words: string[]): Promise<{ status: number; stdout: string; stderr: string }> {
  const program = inRoot('kernel-lib', 'commands', 'start.mjs');
  const env = { ...process.env, INIT_CWD: folder };
  return new Promise((resolve) => {
    execFile(process.execPath, [program, '--no-lab', ...words], { env }, (error, stdout, stderr) => {
      resolve({ status: error === null ? 0 : Number(error.code), stdout, stderr });
    });
  });
}

function folderWith(name: string, files: Record<string, string>) {
  const folder = join(scratch, name);
  mkdirSync(folder);
  for (const [file, text] of Object.entries(files)) writeFileSync(join(folder, file), text);
  return folder;
}

describe('npm start -- catalogue', () => {
  it('fills in what it recognised, marks the rest, stops there and says so', async () => {
    // No error of the motion in declination, and a name for the parallax that says nothing.
    const rows = ['ra,dec,first,pmra,pmra_error,pmdec,phot_g_mean_mag,phot_bp_mean_mag,phot_rp_mean_mag'];
    for (let i = 0; i < 5; i++) rows.push(`${10 + i},20,5.${i},1,0.1,2,1${i},1${i}.5,${9 + i}.5`);
    const folder = folderWith('choices', { 'my field.csv': `${rows.join('\n')}\n`, 'my field.ipynb': 'mine' });
    const run = await start(folder, 'my field.csv');
    expect(run.stderr).toBe('');
    expect(run.status).toBe(1);
    const notebook = join(folder, 'my field-2.ipynb');
    expect(run.stdout).toContain(`Wrote ${notebook} (8 of 9 columns recognised)`);
    expect(run.stdout).toContain('no column was recognised for properMotionDec.error, parallax, parallax.error.');
    expect(run.stdout).toContain(`Fill in the lines marked CHOOSE in ${notebook}`);

    const text = readFileSync(notebook, 'utf8');
    expect(text).toContain("properMotionRa: 'pmra'");
    expect(text).toContain("parallax: ''");
    expect(text).toContain('// Columns that have no role yet: first');
    expect(text).toContain('Choose the columns of properMotionDec.error, parallax, parallax.error');
    expect(readFileSync(join(folder, 'my field.ipynb'), 'utf8')).toBe('mine');
    expect(readdirSync(folder).sort()).toEqual(['my field-2.ipynb', 'my field.csv', 'my field.ipynb', 'node_modules']);
  });

  it('says what is wrong with a file that is no catalogue, and leaves nothing behind', async () => {
    const folder = folderWith('bad', { 'empty.csv': '', 'ragged.csv': 'ra,dec\n1,2\n3\n' });
    const empty = await start(folder, 'empty.csv');
    expect(empty).toMatchObject({ status: 1 });
    expect(empty.stderr).toContain('empty.csv: the file is empty');
    const ragged = await start(folder, 'ragged.csv');
    expect(ragged.status).toBe(1);
    expect(ragged.stderr).toMatch(/ragged\.csv.*line 3/);
    expect(ragged.stderr).not.toContain('    at ');
    expect(readdirSync(folder).sort()).toEqual(['empty.csv', 'ragged.csv']);
    expect(existsSync(join(folder, 'node_modules'))).toBe(false);
  });
});
