import { spawnSync } from 'node:child_process';
import { writeFileSync } from 'node:fs';
import { join } from 'node:path';
import ts from 'typescript';
import { describe, expect, it } from 'vitest';
import * as coeval from '../../kernel-lib';
import { venvPython } from '../../kernel-lib/commands/environment.mjs';
import { choosePhotometry, notebookFor, openRoles } from '../../kernel-lib/commands/notebook-template.mjs';
import { scratchFolder } from './scratch';

const scratch = scratchFolder();

const complete = {
  properMotionRa: 'pmra',
  'properMotionRa.error': 'pmra_error',
  properMotionDec: 'pmdec',
  'properMotionDec.error': 'pmdec_error',
  parallax: 'parallax',
  'parallax.error': 'parallax_error',
  'magnitude.G': 'g',
  'magnitude.BP': 'bp',
  'magnitude.RP': 'rp',
};

const codeOf = (notebook: ReturnType<typeof notebookFor>) =>
  notebook.cells.filter((cell) => cell.cell_type === 'code').map((cell) => cell.source.join(''));

/** Syntax errors of a cell, as the compiler sees them. */
const syntaxErrors = (source: string) =>
  ts.transpileModule(source, { reportDiagnostics: true, compilerOptions: { target: ts.ScriptTarget.ES2022 } })
    .diagnostics;

describe('choosePhotometry', () => {
  const bands = (...names: string[]) => Object.fromEntries(names.map((name) => [name, 'x']));
  it('prefers what is complete, Gaia before Johnson', () => {
    expect(choosePhotometry(complete).colour).toBe('BP-RP');
    expect(choosePhotometry(bands('magnitude.G', 'magnitude.B', 'magnitude.V')).colour).toBe('B-V');
    expect(choosePhotometry(bands('magnitude.V', 'colour.B-V', 'magnitude.G')).colour).toBe('B-V');
    expect(choosePhotometry(bands('magnitude.G', 'colour.BP-RP')).colour).toBe('BP-RP');
    expect(choosePhotometry(bands('magnitude.V')).colour).toBe('B-V');
    expect(choosePhotometry({}).colour).toBe('BP-RP');
  });
});

describe('openRoles', () => {
  const open = (roles: Record<string, string>) => openRoles(roles).map(([role]) => role);
  it('lists what the analysis lacks and nothing it can do without', () => {
    expect(open(complete)).toEqual([]);
    const { parallax, 'magnitude.RP': rp, ...rest } = complete;
    expect([parallax, rp]).toEqual(['parallax', 'rp']);
    expect(open(rest)).toEqual(['parallax', 'magnitude.RP']);
    expect(open({ ...rest, parallax, 'colour.BP-RP': 'c' })).toEqual([]);
  });
});

describe('notebookFor', () => {
  it('fills in the columns that were recognised and asks for nothing then', () => {
    const notebook = notebookFor({ title: 'T', source: 'f.csv', roles: complete, columns: Object.values(complete) });
    const reading = codeOf(notebook)[1];
    for (const [role, column] of Object.entries(complete)) {
      expect(reading).toMatch(new RegExp(`^  '?${role.replace('.', '\\.')}'?: '${column}',$`, 'm'));
    }
    expect(reading).toContain("readCatalogue('f.csv', { roles })");
    expect(reading).not.toContain('CHOOSE');
  });

  it('marks what was not recognised, lists the columns that are free, and repeats what the reader found odd', () => {
    const { parallax, ...roles } = complete;
    const columns = [...Object.values(roles), parallax, 'odd'];
    const warnings = ['Column "g" holds 99.999 in 3 rows.'];
    const reading = codeOf(notebookFor({ title: 'T', source: 'f.csv', roles, columns, warnings }))[1];
    expect(reading).toMatch(/\/\/ CHOOSE the column that holds the parallax, mas\n {2}parallax: '',/);
    expect(reading).toContain('// Columns that have no role yet: parallax, odd');
    expect(reading).toContain('// Look at this: Column "g" holds 99.999 in 3 rows.');
  });

  it('is a valid notebook whose cells are sound TypeScript, whatever columns are called', () => {
    const odd = ["it's", 'a\nb', 'back\\slash', '*/', '$&', '__proto__', '\u2028'];
    const roles = { ...complete, parallax: odd[0], 'magnitude.G': odd[1], 'magnitude.BP': odd[2] };
    const { 'parallax.error': _, ...some } = roles;
    const warnings = ['two\nlines'];
    const notebook = notebookFor({
      title: "O'Brien *1*\n<b>",
      source: "it's\\.csv",
      roles: some,
      columns: odd,
      warnings,
    });
    for (const source of codeOf(notebook)) expect(syntaxErrors(source)).toEqual([]);
    const file = join(scratch, 'odd.ipynb');
    writeFileSync(file, JSON.stringify(notebook));
    const check = 'import nbformat, sys; nbformat.validate(nbformat.read(sys.argv[1], as_version=4))';
    const run = spawnSync(venvPython, ['-W', 'error', '-c', check, file], { encoding: 'utf8' });
    expect(run.stderr).toBe('');
    expect(run.status).toBe(0);
  });

  it('imports only what the library exports, and uses all of it', () => {
    const whole = { ...complete, rightAscension: 'ra', declination: 'dec' };
    const [imports, ...cells] = codeOf(notebookFor({ title: 'T', source: 'f.csv', roles: whole, columns: [] }));
    const names = (imports.match(/\{([^}]*)\}/)?.[1] ?? '')
      .split(',')
      .map((name: string) => name.trim())
      .filter((name: string) => name !== '');
    const rest = cells.join('\n');
    for (const name of names) {
      expect(rest).toMatch(new RegExp(`\\b${name}\\(`));
      expect(coeval).toHaveProperty(name);
    }
  });
});
