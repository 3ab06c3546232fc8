import { mkdirSync, mkdtempSync, readdirSync, readFileSync, rmSync, statSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { exportReport } from '../../kernel-lib/report/export-report';
import { code, notebook, printed, text } from './notebooks';

let folder: string;
let path: string;

beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), 'coeval-report-'));
  path = join(folder, 'my analysis.ipynb');
  const PIXEL = 'iVBORw0KGgoAAAANSUhEUgAAAAEAAAABCAYAAAAfFcSJAAAADUlEQVR42mNk+M9QDwADhgGAWjR9awAAAABJRU5ErkJggg==';
  writeFileSync(join(folder, 'dot.png'), Buffer.from(PIXEL, 'base64'));
  const book = notebook(
    text('# Title\n\n![dot](dot.png) ![out](../dot.png)'),
    code('1', printed('Result: 3 members\n')),
  );
  writeFileSync(path, JSON.stringify(book));
});

afterAll(() => rmSync(folder, { recursive: true, force: true }));

describe('exportReport', () => {
  it('writes beside the notebook, renews its own report, and says where', async () => {
    const report = await exportReport({ notebook: path });
    expect(report.path).toBe(join(folder, 'my analysis.html'));
    expect(report.bytes).toBe(statSync(report.path).size);
    expect(String(report)).toBe(`Report: ${report.path} (0.0 MB)`);
    const page = readFileSync(report.path, 'utf8');
    expect(page).toContain('<h1>Title</h1>');
    expect(page).toContain('<li>3 members</li>');
    expect(page).toContain('<img alt="dot" src="data:image/png;base64,iVBOR');
    expect(page).toContain('<a href="../dot.png">out</a>');
    expect(page).toMatch(/Coeval \d+\.\d+\.\d+ .* Plotly 4\.1\.2 .* Node \d+/);
    await exportReport({ notebook: path, title: 'Anew' });
    expect(readFileSync(report.path, 'utf8')).toContain('<h1>Anew</h1>');
    expect(readdirSync(folder).filter((name) => name.endsWith('.tmp'))).toEqual([]);
  });

  it('makes the folder of its output', async () => {
    const output = join(folder, 'new', 'deep', 'report.html');
    expect((await exportReport({ notebook: path, output })).path).toBe(output);
  });

  it('leaves a file alone that is no report, unless told otherwise', async () => {
    const output = join(folder, 'mine.html');
    writeFileSync(output, '<p>mine</p>');
    await expect(exportReport({ notebook: path, output })).rejects.toThrow(
      /mine\.html exists and is not an earlier report.*overwrite: true/,
    );
    expect(readFileSync(output, 'utf8')).toBe('<p>mine</p>');
    await exportReport({ notebook: path, output, overwrite: true });
    expect(readFileSync(output, 'utf8')).toContain('Content-Security-Policy');
  });

  it('says what is wrong with its input', async () => {
    const missing = join(folder, 'missing.ipynb');
    await expect(exportReport({ notebook: missing })).rejects.toThrow(`exportReport: there is no file ${missing}.`);
    const unrun = join(folder, 'unrun.ipynb');
    writeFileSync(unrun, JSON.stringify(notebook(text('x'), code('1'))));
    await expect(exportReport({ notebook: unrun })).rejects.toThrow(/has no outputs\. Run it, save it/);
    await expect(exportReport({ notebook: path, titel: 'x' } as never)).rejects.toThrow(/Did you mean "title"/);
    await expect(exportReport({} as never)).rejects.toThrow(/pass the path of a notebook/);
    mkdirSync(join(folder, 'folder.html'));
    await expect(
      exportReport({ notebook: path, output: join(folder, 'folder.html'), overwrite: true }),
    ).rejects.toThrow(/folder\.html cannot be written/);
    expect(readdirSync(folder).filter((name) => name.endsWith('.tmp'))).toEqual([]);
  });
});
