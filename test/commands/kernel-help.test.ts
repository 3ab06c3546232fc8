import { execFile } from 'node:child_process';
import { promisify } from 'node:util';
import { beforeAll, describe, expect, it } from 'vitest';
import { build } from '../../kernel-lib/commands/build.mjs';
import { jupyterEnvironment, venvPython } from '../../kernel-lib/commands/environment.mjs';
import { inRoot } from '../../kernel-lib/commands/paths.mjs';

const run = promisify(execFile);

/** Asks the real kernel, in notebooks/, after the library was imported there by name. */
async function ask(...requests: string[]) {
  const first = "import { Catalogue, measured } from 'coeval';";
  const program = inRoot('test', 'commands', 'ask_kernel.py');
  const { stdout } = await run(venvPython, [program, inRoot('notebooks'), first, ...requests], {
    env: jupyterEnvironment(),
  });
  return JSON.parse(stdout);
}

describe('in a cell of notebooks/', () => {
  let answers: Awaited<ReturnType<typeof ask>>;
  beforeAll(async () => {
    await build();
    answers = await ask('complete:measur', 'complete:declare const c: Catalogue; c.kee', 'inspect:measured');
  });

  it('names are completed, those of the library and those of its results', () => {
    expect(answers[0].matches).toContain('measured');
    expect(answers[1].matches).toContain('keep');
  });

  it('help shows the types and the documentation', () => {
    const text = answers[2].data['text/plain'];
    expect(text).toContain('measured(value: number, lower: number, upper: number, unit?: string): Measured');
    expect(text).toContain('68 % interval');
  });
});
