import { spawnSync } from 'node:child_process';
import { describe, expect, it } from 'vitest';
import { help, readArguments } from '../../kernel-lib/commands/arguments.mjs';
import { inRoot } from '../../kernel-lib/commands/paths.mjs';
import { scratchFolder } from './scratch';

const start = (...words: string[]) =>
  spawnSync(process.execPath, [inRoot('kernel-lib', 'commands', 'start.mjs'), ...words], {
    encoding: 'utf8',
    env: { ...process.env, INIT_CWD: scratch },
  });

const scratch = scratchFolder();

describe('readArguments', () => {
  it('takes a catalogue, options in any order, or nothing', () => {
    expect(readArguments([])).toEqual({ help: false, lab: true, catalogue: null });
    expect(readArguments(['--no-lab', 'a b.csv'])).toEqual({ help: false, lab: false, catalogue: 'a b.csv' });
    expect(readArguments(['x.tsv', '--no-lab']).lab).toBe(false);
    expect(readArguments(['-h']).help).toBe(true);
    expect(readArguments(['--', '--odd-name.csv']).catalogue).toBe('--odd-name.csv');
  });

  it('refuses unknown options by name, and lists those it knows', () => {
    expect(() => readArguments(['--nolab'])).toThrow('unknown option --nolab. Known are --no-lab, --help');
    expect(() => readArguments(['-q'])).toThrow('unknown option -q');
    expect(() => readArguments(['--no-lab=yes'])).toThrow('--no-lab takes no value, got "yes"');
    expect(() => readArguments(['a.csv', 'b.csv'])).toThrow('one catalogue at a time, got 2');
    // A name every object inherits is not an option.
    expect(() => readArguments(['--constructor'])).toThrow('unknown option --constructor');
  });
});

describe('npm start', () => {
  it('explains itself with --help, naming every option', () => {
    const run = start('--help');
    expect(run.status).toBe(0);
    expect(run.stdout.trim()).toBe(help.trim());
    for (const word of ['--no-lab', '--help', 'catalogue.csv', 'CHOOSE']) expect(run.stdout).toContain(word);
  });

  it('ends with status 1 and one line before any set-up when the command line is wrong', () => {
    const unknown = start('--fast');
    expect(unknown.status).toBe(1);
    expect(unknown.stderr.trim().split('\n')).toHaveLength(1);
    expect(unknown.stderr).toContain('unknown option --fast');
    const absent = start('nowhere.csv');
    expect(absent.status).toBe(1);
    expect(absent.stderr).toContain(`there is no file ${scratch}/nowhere.csv`);
    expect(absent.stdout).toBe('');
  });
});
