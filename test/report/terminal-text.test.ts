import { describe, expect, it } from 'vitest';
import { settled, terminalHtml } from '../../kernel-lib/report/terminal-text';

const ESC = '\u001b';

describe('settled', () => {
  it('leaves each line as a terminal would show it in the end', () => {
    expect(settled('10 %\r20 %\r100 %\nnext')).toBe('100 %\nnext');
    expect(settled('abcdef\rxy')).toBe('xycdef');
    expect(settled(`abcdef\rxy${ESC}[K`)).toBe('xy');
    expect(settled('windows\r\nlines\r\n')).toBe('windows\nlines\n');
    expect(settled('ab\bc\b\b\b')).toBe('');
    expect(settled('word boundary, no change')).toBe('word boundary, no change');
    expect(settled('done\r')).toBe('done');
  });
});

describe('terminalHtml', () => {
  it('turns colours into classes and everything else into text', () => {
    expect(terminalHtml(`${ESC}[31m<red>${ESC}[39m & ${ESC}[1mbold${ESC}[22m`)).toBe(
      '<span class="ansi-red-fg">&lt;red&gt;</span> &amp; <span class="ansi-bold">bold</span>',
    );
    expect(terminalHtml('https://example.org')).toBe('https://example.org');
  });
});
