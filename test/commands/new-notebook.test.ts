import { mkdirSync, readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { cannotWrite, catalogueFile, stemOf, writeNewNotebook } from '../../kernel-lib/commands/new-notebook.mjs';
import { notebookOf, scratchFolder } from './scratch';

const scratch = scratchFolder();

describe('stemOf', () => {
  it('drops the endings of a catalogue and nothing else', () => {
    expect(stemOf('/a/field.csv')).toBe('field');
    expect(stemOf('field.csv.gz')).toBe('field');
    expect(stemOf('My field 2.5 deg.ecsv')).toBe('My field 2.5 deg');
    expect(stemOf('noending')).toBe('noending');
    expect(stemOf('.csv')).toBe('.csv');
  });
});

describe('writeNewNotebook', () => {
  it('takes the first free name and never touches a file that is there', () => {
    const catalogue = join(scratch, 'stars.csv');
    writeFileSync(join(scratch, 'stars.ipynb'), 'mine');
    writeFileSync(join(scratch, 'stars-2.html'), 'my report');
    const first = writeNewNotebook(catalogue, notebookOf('1'));
    expect(first).toEqual({ notebook: join(scratch, 'stars-3.ipynb'), report: join(scratch, 'stars-3.html') });
    const second = writeNewNotebook(catalogue, notebookOf('2'));
    expect(second.notebook).toBe(join(scratch, 'stars-4.ipynb'));
    expect(readFileSync(join(scratch, 'stars.ipynb'), 'utf8')).toBe('mine');
    expect(readFileSync(join(scratch, 'stars-2.html'), 'utf8')).toBe('my report');
    expect(JSON.parse(readFileSync(first.notebook, 'utf8'))).toEqual(notebookOf('1'));
    expect(readdirSync(scratch).sort()).toEqual(['stars-2.html', 'stars-3.ipynb', 'stars-4.ipynb', 'stars.ipynb']);
  });

  it('says what to do when the folder cannot be written', () => {
    const say = (code: string) => cannotWrite(Object.assign(new Error('x'), { code }), '/archive').message;
    expect(say('EACCES')).toBe(
      'nothing can be written to /archive: it is not yours to write in. Copy the catalogue to a folder of yours and name it there.',
    );
    expect(say('EROFS')).toContain('read-only');
    expect(say('ENOSPC')).toContain('disk is full');
    // A folder that is gone by the time of writing fails in the same way.
    expect(() => writeNewNotebook(join(scratch, 'gone', 'a.csv'), notebookOf('1'))).toThrow(
      'nothing can be written to',
    );
  });
});

describe('catalogueFile', () => {
  it('wants a file that could be a catalogue', () => {
    mkdirSync(join(scratch, 'folder.csv'));
    writeFileSync(join(scratch, 'a.csv'), 'x\n1\n');
    writeFileSync(join(scratch, 'a.ipynb'), '{}');
    expect(catalogueFile('a.csv', scratch)).toBe(join(scratch, 'a.csv'));
    expect(catalogueFile(join(scratch, 'a.csv'), '/')).toBe(join(scratch, 'a.csv'));
    expect(() => catalogueFile('b.csv', scratch)).toThrow(`there is no file ${join(scratch, 'b.csv')}`);
    expect(() => catalogueFile('folder.csv', scratch)).toThrow('is a folder');
    expect(() => catalogueFile('a.ipynb', scratch)).toThrow('is not a catalogue');
  });
});
