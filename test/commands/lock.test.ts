import { spawn } from 'node:child_process';
import { existsSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { withLock } from '../../kernel-lib/commands/lock.mjs';
import { inRoot } from '../../kernel-lib/commands/paths.mjs';
import { scratchFolder } from './scratch';

const scratch = scratchFolder();

// Reads a number, waits, writes it back plus one: loses counts when two run at once.
const counting = `
import { readFileSync, writeFileSync } from 'node:fs';
import { withLock } from ${JSON.stringify(inRoot('kernel-lib', 'commands', 'lock.mjs'))};
const [lock, file] = process.argv.slice(1);
for (let i = 0; i < 3; i++) {
  await withLock(lock, async () => {
    const count = Number(readFileSync(file, 'utf8'));
    await new Promise((resolve) => setTimeout(resolve, 20));
    writeFileSync(file, String(count + 1));
  });
}
`;

const run = (...words: string[]) =>
  new Promise<number | null>((resolve) => {
    const child = spawn(process.execPath, ['--input-type=module', '-e', counting, ...words], { stdio: 'inherit' });
    child.on('close', resolve);
  });

describe('withLock', () => {
  it('lets one process in at a time', async () => {
    const lock = join(scratch, 'lock');
    const file = join(scratch, 'count');
    writeFileSync(file, '0');
    expect(await Promise.all([run(lock, file), run(lock, file), run(lock, file)])).toEqual([0, 0, 0]);
    expect(readFileSync(file, 'utf8')).toBe('9');
    expect(existsSync(lock)).toBe(false);
  });

  it('takes over the lock of a process that is gone', async () => {
    const lock = join(scratch, 'stale');
    const child = spawn(process.execPath, ['-e', '']);
    await new Promise((resolve) => child.on('close', resolve));
    writeFileSync(lock, String(child.pid));
    expect(await withLock(lock, async () => 'done')).toBe('done');
  });

  it('is released when the work fails', async () => {
    const lock = join(scratch, 'failing');
    const work = () => withLock(lock, () => Promise.reject(new Error('no disk')));
    await expect(work()).rejects.toThrow('no disk');
    expect(existsSync(lock)).toBe(false);
  });
});
