import { mkdtempSync, readdirSync, readFileSync, rmSync, statSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { dirname, join, relative, resolve, sep } from 'node:path';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';
import * as coeval from '../kernel-lib';
import { browserFace, bundleForBrowser } from '../kernel-lib/commands/build.mjs';

const LIBRARY = resolve(dirname(fileURLToPath(import.meta.url)), '../kernel-lib');

/** The order in which data flows: a room imports only from itself and from rooms before it. */
const ROOMS = [
  'quantity',
  'numeric',
  'catalogue',
  'photometry',
  'extinction',
  'distance',
  'stars',
  'membership',
  'models',
  'turnoff',
  'fit',
  'relations',
  'simulate',
  'diagrams',
  'notebook',
  'report',
];
const IMPURE = new Set(['notebook', 'report', 'commands']);

function sources(folder: string): string[] {
  return readdirSync(folder).flatMap((name) => {
    const path = join(folder, name);
    if (statSync(path).isDirectory()) return name === 'dist' || name === 'node_modules' ? [] : sources(path);
    return name.endsWith('.ts') && !name.endsWith('.d.ts') ? [path] : [];
  });
}

const files = sources(LIBRARY);
const roomOf = (path: string) => relative(LIBRARY, path).split(sep)[0];
const inRooms = files.filter((f) => ROOMS.includes(roomOf(f)));

function importsOf(path: string): string[] {
  const text = readFileSync(path, 'utf8');
  return [...text.matchAll(/\bfrom\s+'([^']+)'|\bimport\s*\(?\s*'([^']+)'|\brequire\(\s*'([^']+)'/g)].map(
    (m) => m[1] ?? m[2] ?? m[3],
  );
}

describe('rooms', () => {
  it('every folder of the library is a known room', () => {
    const folders = readdirSync(LIBRARY).filter((n) => statSync(join(LIBRARY, n)).isDirectory());
    const known = [...ROOMS, 'commands', 'dist', 'node_modules'];
    expect(folders.filter((f) => !known.includes(f))).toEqual([]);
    expect(inRooms.length).toBeGreaterThan(60);
  });

  it('a room imports only from itself and from rooms before it', () => {
    const wrong: string[] = [];
    for (const file of inRooms) {
      const own = ROOMS.indexOf(roomOf(file));
      for (const target of importsOf(file).filter((t) => t.startsWith('.'))) {
        const room = roomOf(resolve(dirname(file), target));
        const at = ROOMS.indexOf(room);
        if (at < 0 || at > own) wrong.push(`${relative(LIBRARY, file)} imports ${target}`);
      }
    }
    expect(wrong).toEqual([]);
  });

  it('no two files of the library import one another in a ring (types apart)', () => {
    const graph = new Map<string, string[]>();
    for (const file of inRooms) {
      const text = readFileSync(file, 'utf8');
      const targets = [...text.matchAll(/^\s*(?:import|export)\s+(?!type\b)[^;]*?from\s+'(\.[^']+)'/gm)].map((m) =>
        resolve(dirname(file), m[1]).concat('.ts'),
      );
      graph.set(file, targets);
    }
    const state = new Map<string, 'open' | 'done'>();
    const rings: string[] = [];
    const walk = (file: string, trail: string[]): void => {
      if (state.get(file) === 'done') return;
      if (state.get(file) === 'open') {
        rings.push([...trail.slice(trail.indexOf(file)), file].map((f) => relative(LIBRARY, f)).join(' -> '));
        return;
      }
      state.set(file, 'open');
      for (const next of graph.get(file) ?? []) walk(next, [...trail, file]);
      state.set(file, 'done');
    };
    for (const file of graph.keys()) walk(file, []);
    expect(rings).toEqual([]);
  });

  it('pure rooms use no Node import, no clock and no unseeded randomness', () => {
    const wrong: string[] = [];
    for (const file of inRooms.filter((f) => !IMPURE.has(roomOf(f)))) {
      const name = relative(LIBRARY, file);
      const text = readFileSync(file, 'utf8').replace(/\/\*[\s\S]*?\*\/|\/\/.*$/gm, '');
      if (/Math\.random|Date\.now|new Date\(\)/.test(text)) wrong.push(`${name}: clock or Math.random`);
      if (name === join('catalogue', 'files.ts')) continue;
      const node = importsOf(file).filter((t) => t.startsWith('node:'));
      if (node.length > 0) wrong.push(`${name}: ${node.join(', ')}`);
      if (/\b(?:process|document|window)\.[a-z]/.test(text)) wrong.push(`${name}: a global of Node or of a page`);
    }
    expect(wrong).toEqual([]);
  });

  it('the pure rooms bundle for a browser, with nothing of Node in them', async () => {
    const face = browserFace(readFileSync(join(LIBRARY, 'index.ts'), 'utf8'));
    expect(face).toMatch(/turnoffAge/);
    expect(face).not.toMatch(/notebook|report/);
    const folder = mkdtempSync(join(tmpdir(), 'coeval-rooms-'));
    await bundleForBrowser(face, LIBRARY, join(folder, 'coeval.mjs'), 'silent');
    const text = readFileSync(join(folder, 'coeval.mjs'), 'utf8');
    rmSync(folder, { recursive: true });
    expect(text.length).toBeGreaterThan(50_000);
    expect(text).not.toMatch(/from\s*["']node:|\brequire\(["']node:/);
  });

  it('the public face is what was decided', () => {
    // A new name is a decision: add it here when you export it.
    expect(Object.keys(coeval).sort()).toMatchSnapshot();
  });
});
