import { spawnSync } from 'node:child_process';
import { Problem } from './problem.mjs';

const oldest = [3, 9];
const candidates = [
  'python3',
  'python',
  'python3.14',
  'python3.13',
  'python3.12',
  'python3.11',
  'python3.10',
  'python3.9',
];

// Debian ships python3 without ensurepip; only trying to import it tells.
const question = `
import sys
def has(name):
    try:
        __import__(name)
        return 1
    except ImportError:
        return 0
print(sys.version_info[0], sys.version_info[1], has('venv') and has('ensurepip'))
`;

/** What one interpreter says of itself, or null when it cannot be run. */
function ask(program, env) {
  const run = spawnSync(program, ['-c', question], { encoding: 'utf8', env });
  if (run.status !== 0) return null;
  const [major, minor, venv] = run.stdout.trim().split(' ').map(Number);
  return { program, major, minor, venv: venv === 1 };
}

const isNewEnough = ({ major, minor }) => major > oldest[0] || (major === oldest[0] && minor >= oldest[1]);

/**
 * The first Python on the path that can make a virtual environment.
 * @returns the program's name
 * @throws Problem when there is none, saying which package mends it
 */
export function findPython(env = process.env) {
  const found = candidates.map((program) => ask(program, env)).filter((python) => python !== null);
  const usable = found.filter(isNewEnough);
  const withVenv = usable.find((python) => python.venv);
  if (withVenv) return withVenv.program;
  if (usable.length > 0) {
    const { major, minor } = usable[0];
    throw new Problem(
      `Python ${major}.${minor} is here, but without venv. On Debian or Ubuntu: apt-get install python3-venv; then run this again.`,
    );
  }
  const seen = found.length > 0 ? `only Python ${found[0].major}.${found[0].minor} was found` : 'no python3 was found';
  throw new Problem(
    `Python 3.9 or newer is needed for JupyterLab; ${seen}. On Debian or Ubuntu: apt-get install python3 python3-venv; elsewhere see python.org.`,
  );
}
