import { describe, expect, it } from 'vitest';
import { reportHtml } from '../../kernel-lib/report/report-html';

const notebook = (outputs: object[]) =>
  ({
    nbformat: 4,
    nbformat_minor: 5,
    metadata: {},
    cells: [{ cell_type: 'code', id: 'a', metadata: {}, execution_count: 1, source: '1', outputs }],
  }) as never;
const html = (text: string) => ({ output_type: 'display_data', metadata: {}, data: { 'text/html': text } });
const stderr = (text: string) => ({ output_type: 'stream', name: 'stderr', text });

describe('reportHtml', () => {
  it('lets no output send the reader elsewhere', () => {
    const page = reportHtml(
      notebook([html('<p>a</p><META http-equiv="refresh" content="0;url=http://x/"><base href="http://x/">')]),
    );
    expect(page).toContain('<p>a</p>');
    expect(page).not.toMatch(/http-equiv="refresh"|<base/i);
  });

  it('takes a log line with a time for no error, and a compiler message for one', () => {
    expect(reportHtml(notebook([stderr('12:30 - started\nall well\n')]))).not.toContain('ended with an error');
    expect(reportHtml(notebook([stderr("3:7 - Cannot find name 'x'.\n")]))).toContain('ended with an error');
  });

  it('says what is wrong with its input', () => {
    expect(() => reportHtml({} as never)).toThrow(/must be a notebook of format 4/);
    expect(() => reportHtml(notebook([]), { when: 'yesterday' })).toThrow(/when is "yesterday"; write a date/);
  });
});
