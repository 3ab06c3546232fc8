import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll } from 'vitest';

/** A folder of its own for a test file, outside the project, gone afterwards. */
export function scratchFolder(): string {
  const folder = mkdtempSync(join(tmpdir(), 'coeval-test-'));
  afterAll(() => rmSync(folder, { recursive: true, force: true }));
  return folder;
}

/** A progress that keeps its lines. */
export function recordedProgress() {
  const lines: string[] = [];
  const updates: string[] = [];
  return {
    lines,
    updates,
    line: (text: string) => void lines.push(text),
    update: (text: string) => void updates.push(text),
    end: () => undefined,
  };
}

/** nbformat 4.5 JSON of cells; markdown where the source begins with #. */
export function notebookOf(...sources: string[]) {
  const cells = sources.map((source, i) => {
    const common = { id: `cell-${i}`, metadata: {}, source };
    if (source.startsWith('#')) return { cell_type: 'markdown', ...common };
    return { cell_type: 'code', ...common, execution_count: null, outputs: [] };
  });
  const kernelspec = { display_name: 'TypeScript (tslab)', language: 'typescript', name: 'tslab' };
  return { cells, metadata: { kernelspec }, nbformat: 4, nbformat_minor: 5 };
}
