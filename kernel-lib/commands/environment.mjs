import { existsSync } from 'node:fs';
import { homedir } from 'node:os';
import { join } from 'node:path';
import { inRoot } from './paths.mjs';

export const venv = inRoot('.venv');
export const venvPython = join(venv, 'bin', 'python');
export const setUpFolder = inRoot('.set-up');

/**
 * Environment for Jupyter programs: all they write stays in the project's folder, the kernels of .venv come before the user's
 * own, and the user's Jupyter settings are neither read nor changed.
 */
export function jupyterEnvironment(base = process.env) {
  const folder = join(setUpFolder, 'jupyter');
  const env = {
    ...base,
    VIRTUAL_ENV: venv,
    PATH: `${join(venv, 'bin')}:${base.PATH ?? ''}`,
    JUPYTER_PREFER_ENV_PATH: '1',
    JUPYTER_PLATFORM_DIRS: '1',
    JUPYTER_CONFIG_DIR: join(folder, 'config'),
    JUPYTER_DATA_DIR: join(folder, 'data'),
    JUPYTER_RUNTIME_DIR: join(folder, 'runtime'),
    JUPYTERLAB_SETTINGS_DIR: join(folder, 'lab-settings'),
    JUPYTERLAB_WORKSPACES_DIR: join(folder, 'lab-workspaces'),
    IPYTHONDIR: join(folder, 'ipython'),
    // JupyterLab asks npm for its folders, and npm writes a log whenever it is asked.
    npm_config_cache: join(setUpFolder, 'npm'),
    PYTHONNOUSERSITE: '1',
    PYTHONUNBUFFERED: '1',
  };
  delete env.PYTHONHOME;
  delete env.PYTHONPATH;
  return env;
}

/** Environment for pip: into the virtual environment only, and no cache is begun in a home that has none. */
export function pipEnvironment(base = process.env) {
  const cache = base.PIP_CACHE_DIR ?? join(base.XDG_CACHE_HOME ?? join(base.HOME ?? homedir(), '.cache'), 'pip');
  const env = { ...base, PIP_USER: '0', PIP_DISABLE_PIP_VERSION_CHECK: '1', PYTHONNOUSERSITE: '1' };
  if (!existsSync(cache)) env.PIP_NO_CACHE_DIR = '1';
  delete env.PYTHONHOME;
  delete env.PYTHONPATH;
  delete env.PIP_TARGET;
  delete env.PIP_PREFIX;
  delete env.PIP_REQUIRE_VIRTUALENV;
  return env;
}

/**
 * Environment for npm: its cache is used where there is one, and none is begun in a home that has none.
 * @returns an object { env, ownCache } with ownCache the folder to remove afterwards, or null
 */
export function npmEnvironment(base = process.env) {
  const cache = base.npm_config_cache ?? join(base.HOME ?? homedir(), '.npm');
  if (existsSync(join(cache, '_cacache'))) return { env: base, ownCache: null };
  const ownCache = join(setUpFolder, 'npm-once');
  return { env: { ...base, npm_config_cache: ownCache }, ownCache };
}
