import { spawnSync } from 'node:child_process';
import {
  chmodSync,
  cpSync,
  existsSync,
  mkdirSync,
  readdirSync,
  readFileSync,
  renameSync,
  writeFileSync,
} from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import {
  jupyterEnvironment,
  npmEnvironment,
  pipEnvironment,
  venv,
  venvPython,
} from '../../kernel-lib/commands/environment.mjs';
import { holdsAll } from '../../kernel-lib/commands/node-packages.mjs';
import { inRoot } from '../../kernel-lib/commands/paths.mjs';
import { findPython } from '../../kernel-lib/commands/python.mjs';
import { checkMachine } from '../../kernel-lib/commands/set-up.mjs';
import { scratchFolder } from './scratch';

const scratch = scratchFolder();

/** A folder with programs that print a line each, to stand for the pythons of some machine. */
function machineWith(programs: Record<string, string>) {
  const folder = join(scratch, `bin-${readdirSync(scratch).length}`);
  mkdirSync(folder);
  for (const [name, answer] of Object.entries(programs)) {
    writeFileSync(join(folder, name), `#!/bin/sh\necho "${answer}"\n`);
    chmodSync(join(folder, name), 0o755);
  }
  return { PATH: folder };
}

describe('checkMachine', () => {
  it('wants Node 20.19 and a system that is not Windows', () => {
    expect(() => checkMachine('20.18.9', 'linux')).toThrow('Node 20.19 or newer is needed, this is 20.18.9');
    expect(() => checkMachine('18.20.0', 'linux')).toThrow('this is 18.20.0');
    expect(() => checkMachine('20.19.0', 'win32')).toThrow('WSL');
    for (const version of ['20.19.0', '20.20.2', '22.0.0', '24.1.0']) checkMachine(version, 'darwin');
  });
});

describe('findPython', () => {
  it('takes the first that can make a virtual environment', () => {
    expect(findPython(machineWith({ python3: '3 8 1', 'python3.12': '3 12 1' }) as never)).toBe('python3.12');
    expect(findPython(machineWith({ python3: '3 13 0', 'python3.10': '3 10 1' }) as never)).toBe('python3.10');
    expect(findPython(machineWith({ python: '3 9 1' }) as never)).toBe('python');
  });

  it('says in one line what is missing', () => {
    const message = (programs: Record<string, string>) => {
      try {
        return findPython(machineWith(programs) as never);
      } catch (error) {
        return (error as Error).message;
      }
    };
    expect(message({ python3: '3 11 0' })).toMatch(/^Python 3\.11 is here, but without venv.*python3-venv/);
    expect(message({ python3: '3 8 1' })).toMatch(/^Python 3\.9 or newer.*only Python 3\.8 was found/);
    expect(message({})).toMatch(/no python3 was found/);
  });
});

describe('holdsAll', () => {
  const locked = {
    '': { version: '1.0.0' },
    'kernel-lib': { version: '1.0.0' },
    'node_modules/coeval': { link: true },
    'node_modules/a': { version: '1.2.0', integrity: 'sha512-a' },
    'node_modules/other-system': { version: '1.0.0', integrity: 'sha512-o', optional: true },
  };
  const a = locked['node_modules/a'];

  it('wants every package of this machine in the locked version', () => {
    expect(holdsAll(locked, { 'node_modules/a': a })).toBe(true);
    expect(holdsAll(locked, {})).toBe(false);
    expect(holdsAll(locked, { 'node_modules/a': { ...a, version: '1.1.0' } })).toBe(false);
    expect(holdsAll(locked, { 'node_modules/a': { ...a, integrity: 'sha512-b' } })).toBe(false);
  });
});

describe('environments', () => {
  it('begin no cache in a home that has none, and use one that is there', () => {
    const home = join(scratch, 'home');
    mkdirSync(join(home, '.npm', '_cacache'), { recursive: true });
    const bare = { HOME: join(scratch, 'bare') } as never;
    expect(npmEnvironment(bare).env.npm_config_cache).toBe(npmEnvironment(bare).ownCache);
    expect(npmEnvironment({ HOME: home } as never).ownCache).toBeNull();
    expect(pipEnvironment(bare)).toHaveProperty('PIP_NO_CACHE_DIR', '1');
    mkdirSync(join(home, '.cache', 'pip'), { recursive: true });
    expect(pipEnvironment({ HOME: home } as never)).not.toHaveProperty('PIP_NO_CACHE_DIR');
  });

  it('keep the settings of another Python out', () => {
    const env = { PYTHONPATH: '/x', PYTHONHOME: '/y', PIP_TARGET: '/z', PATH: '/usr/bin' } as never;
    for (const made of [pipEnvironment(env), jupyterEnvironment(env)]) {
      expect(made).not.toHaveProperty('PYTHONPATH');
      expect(made).not.toHaveProperty('PYTHONHOME');
    }
    expect(pipEnvironment(env)).not.toHaveProperty('PIP_TARGET');
  });
});

describe('the kernel', () => {
  const home = join(scratch, 'empty-home');
  mkdirSync(home);
  const env = { ...jupyterEnvironment(), HOME: home, XDG_DATA_HOME: join(home, 'data') };

  it('is registered inside .venv, and runs this Node and the tslab of this project', () => {
    const run = spawnSync(venvPython, ['-m', 'jupyter', 'kernelspec', 'list', '--json'], { env, encoding: 'utf8' });
    const found = JSON.parse(run.stdout).kernelspecs.tslab;
    expect(found.resource_dir).toBe(join(venv, 'share', 'jupyter', 'kernels', 'tslab'));
    const [node, program, ...rest] = found.spec.argv;
    expect(node).toBe(process.execPath);
    expect(program).toBe(inRoot('node_modules', 'tslab', 'bin', 'tslab'));
    expect(existsSync(program)).toBe(true);
    expect(rest).toEqual(['kernel', '--config-path', '{connection_file}']);
    expect(found.spec.language).toBe('typescript');
  });

  it('leaves the home empty: set-up that is complete, and a run of Jupyter', () => {
    const setUp = spawnSync(
      process.execPath,
      [inRoot('kernel-lib', 'commands', 'set-up.mjs'), '--tests', '--no-build'],
      {
        env: { ...process.env, HOME: home },
        encoding: 'utf8',
      },
    );
    expect(setUp.stderr).toBe('');
    // Nothing had to be done, so nothing but the last line is printed.
    expect(setUp.stdout).toBe('Set-up is complete.\n');
    spawnSync(venvPython, ['-m', 'jupyter', 'lab', 'path'], { env });
    expect(readdirSync(home)).toEqual([]);
  });
});

describe('the Python environment', () => {
  // A copy of the commands in a folder of its own, with an empty list of packages: made for real, without the network.
  const project = join(scratch, 'project');
  cpSync(inRoot('kernel-lib', 'commands'), join(project, 'kernel-lib', 'commands'), { recursive: true });
  writeFileSync(join(project, 'kernel-lib', 'commands', 'requirements.txt'), '# none\n');
  const script = `
    import { arePythonPackagesInstalled, installPythonPackages } from './kernel-lib/commands/python-packages.mjs';
    const lines = [];
    const progress = { line: (text) => lines.push(text), update() {}, end() {} };
    if (!arePythonPackagesInstalled({ tests: false })) await installPythonPackages({ tests: false, progress });
    console.log(JSON.stringify(lines));
  `;
  const install = (folder: string): string[] => {
    const run = spawnSync(process.execPath, ['--input-type=module', '-e', script], { cwd: folder, encoding: 'utf8' });
    expect(run.stderr).toBe('');
    return JSON.parse(run.stdout);
  };

  it('is made once, made anew after an interruption or a move, and refilled when the list changed', () => {
    const made = 'Making the Python environment .venv ...';
    expect(install(project)).toContain(made);
    expect(existsSync(join(project, '.venv', 'bin', 'python'))).toBe(true);
    expect(install(project)).toEqual([]);

    writeFileSync(join(project, '.venv', '.under-way'), '');
    writeFileSync(join(project, '.venv', 'half-written'), '');
    expect(install(project)).toContain(made);
    expect(existsSync(join(project, '.venv', 'half-written'))).toBe(false);
    expect(install(project)).toEqual([]);

    writeFileSync(join(project, 'kernel-lib', 'commands', 'requirements.txt'), '# still none\n');
    const refilled = install(project);
    expect(refilled).toHaveLength(1);
    expect(refilled).not.toContain(made);

    const moved = join(scratch, 'moved');
    renameSync(project, moved);
    expect(install(moved)).toContain(made);
    expect(readFileSync(join(moved, '.venv', 'bin', 'pip'), 'utf8')).toContain(moved);
  });
});
