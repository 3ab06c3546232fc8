import { chmodSync, mkdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { findChromium } from '../chromium.mjs';
import { scratchFolder } from './scratch';

const scratch = scratchFolder();

describe('findChromium', () => {
  it('takes CHROME_PATH, else the first on the path, and nothing that cannot be run', () => {
    const folder = join(scratch, 'bin');
    mkdirSync(folder);
    const find = (env: Record<string, string>) => findChromium(env as never);
    const chrome = join(folder, 'google-chrome');
    writeFileSync(chrome, '#!/bin/sh\n');
    expect(find({ PATH: folder })).not.toBe(chrome);
    chmodSync(chrome, 0o755);
    expect(find({ PATH: `/nowhere:${folder}` })).toBe(chrome);
    expect(find({ PATH: '', CHROME_PATH: chrome })).toBe(chrome);
    // One that is named and is not there is not passed over in silence.
    expect(find({ PATH: folder, CHROME_PATH: join(folder, 'gone') })).toBeNull();
  });
});
