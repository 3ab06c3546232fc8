import { existsSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { venv } from './environment.mjs';
import { inRoot } from './paths.mjs';

export const kernelName = 'tslab';

/** What Jupyter must know to start the kernel: this Node, and the tslab of this project. */
export const kernelSpec = () => ({
  argv: [
    process.execPath,
    inRoot('node_modules', 'tslab', 'bin', 'tslab'),
    'kernel',
    '--config-path',
    '{connection_file}',
  ],
  display_name: 'TypeScript (tslab)',
  language: 'typescript',
});

// JupyterLab otherwise asks on first start whether it may fetch news over the network.
const labDefaults = {
  '@jupyterlab/apputils-extension:notification': { fetchNews: 'false', checkForUpdates: false },
};

function writeIfChanged(file, value) {
  const text = `${JSON.stringify(value, null, 2)}\n`;
  if (existsSync(file) && readFileSync(file, 'utf8') === text) return;
  mkdirSync(dirname(file), { recursive: true });
  writeFileSync(file, text);
}

/** Registers the kernel inside .venv only, never in the user's home, and JupyterLab's defaults beside it. */
export function registerKernel() {
  writeIfChanged(join(venv, 'share', 'jupyter', 'kernels', kernelName, 'kernel.json'), kernelSpec());
  writeIfChanged(join(venv, 'share', 'jupyter', 'lab', 'settings', 'overrides.json'), labDefaults);
}
