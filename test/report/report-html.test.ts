import { describe, expect, it } from 'vitest';
import { loaderKey, plotlyLoader } from '../../kernel-lib/notebook/plotly-loader';
import { executedAt, parseNotebook, resultLine } from '../../kernel-lib/report/notebook-json';
import { reportHtml } from '../../kernel-lib/report/report-html';
import { code, html, notebook, printed, shown, text } from './notebooks';

const RESULT =
  'Result: 312 ± 9 members; distance 187.3 ± 0.6 pc; age 0.71 +0.04 -0.03 Gyr (each with its 68 % interval)';
const body = (page: string) => /<main>([\s\S]*)<\/main>/.exec(page)?.[1] ?? '';

describe('the head of a report', () => {
  it('takes its title from the options, the metadata, or the first heading, which is then not repeated', () => {
    const book = notebook(text('# From *field* to `age`\n\nText.'));
    expect(reportHtml(book)).toContain('<h1>From field to age</h1>');
    expect(body(reportHtml(book))).not.toContain('<h1');
    expect(body(reportHtml(book))).toContain('Text.');
    expect(reportHtml({ ...book, metadata: { title: 'A <title>' } })).toContain('<title>A &lt;title&gt;</title>');
    expect(body(reportHtml(book, { title: 'Other' }))).toContain('<em>field</em>');
    expect(reportHtml(notebook())).toContain('<h1>Report</h1>');
  });

  it('shows the last result line as a list before anything else', () => {
    const page = reportHtml(notebook(code('a', printed('Result: old\n')), code('b', printed(`x\n${RESULT}\ny`))));
    expect(page).toContain('<li>312 ± 9 members</li><li>distance 187.3 ± 0.6 pc</li><li>age 0.71 +0.04 -0.03 Gyr</li>');
    expect(page).toContain('<p>Each with its 68 % interval.</p>');
    expect(page.indexOf('<li>312')).toBeLessThan(page.indexOf('<main>'));
    expect(page).not.toContain('<li>old');
  });

  it('finds the result line in the text form of a bundle, and none where there is none', () => {
    expect(resultLine(notebook(code('a', shown({ 'text/html': '<b>', 'text/plain': [`${RESULT}\n`, 'more'] }))))).toBe(
      RESULT.slice(8),
    );
    expect(resultLine(notebook(code('a', printed('no Result: here\n'), printed('Result: bad', 'stderr'))))).toBeNull();
    expect(reportHtml(notebook(code('a')))).not.toContain('class="result"');
  });

  it('says when the notebook ran, from its own record where it has one', () => {
    const ran = (when: string) => ({ ...code('a'), metadata: { execution: { 'shell.execute_reply': when } } });
    const book = notebook(ran('2026-03-01T10:00:00Z'), ran('2026-03-01T12:30:59.5Z'), code('b'));
    expect(executedAt(book)).toBe('2026-03-01T12:30:59.5Z');
    expect(reportHtml(book, { when: '2020-01-01T00:00:00Z' })).toContain('Run 2026-03-01 12:30 UTC');
    const facts = { when: '2020-01-01T00:00:00Z', source: 'a<b.ipynb', versions: { Coeval: '1.2.3' } };
    expect(reportHtml(notebook(code('b')), facts)).toContain(
      'Run 2020-01-01 00:00 UTC &middot; notebook a&lt;b.ipynb &middot; Coeval 1.2.3',
    );
  });

  it('lists the sections where there are several', () => {
    const page = reportHtml(notebook(text('## One & *two*\n\n## <b>\n\n### deeper\n\n## Three')));
    const [, nav] = /<nav[^>]*>(.*?)<\/nav>/s.exec(page) ?? [];
    expect(nav).toBe(
      '<ol><li><a href="#section-1">One &amp; two</a></li><li><a href="#section-2">&lt;b&gt;</a></li>' +
        '<li><a href="#section-4">Three</a></li></ol>',
    );
    for (const n of [1, 2, 4]) expect(page).toContain(`<h2 id="section-${n}">`);
    expect(reportHtml(notebook(text('## One')))).not.toContain('<nav');
  });

  it('says that a cell failed, whether the error was sent or only printed', () => {
    const error = { output_type: 'error', ename: 'E', evalue: 'bad', traceback: ['\u001b[31mE\u001b[0m: <bad>'] };
    const sent = reportHtml(notebook(code('a'), code('b', error)));
    expect(sent).toContain('Code cell 2 of 2 ended with an error');
    expect(sent).toContain('role="alert"><span class="ansi-red-fg">E</span>: &lt;bad&gt;</pre>');
    const stack = 'Error: bad\n    at evalmachine.<anonymous>:2:7\n';
    expect(reportHtml(notebook(code('a', printed(stack, 'stderr'))))).toContain('Code cell 1 of 1 ended with an error');
    expect(reportHtml(notebook(code('a', printed("1:5 - ';' expected.", 'stderr'))))).toContain('ended with an error');
    const warning = reportHtml(notebook(code('a', printed('coeval: 3 rows left out', 'stderr'))));
    expect(warning).not.toContain('ended with an error');
    expect(warning).toContain('class="output warning"');
  });
});

describe('the policy of a report', () => {
  it('stands before anything that could ask for something and allows no address', () => {
    const page = reportHtml(notebook(text('![x](https://example.org/x.png)')));
    const policy = /Content-Security-Policy" content="([^"]*)"/.exec(page)?.[1] ?? '';
    expect(policy).toContain("default-src 'none'");
    expect(policy).not.toMatch(/https?:|\*|connect-src|frame-src/);
    expect(page.indexOf('Content-Security-Policy')).toBeLessThan(page.indexOf('<title>'));
    expect(page).not.toMatch(/<img[^>]*https/);
    expect(page).toContain('<a href="https://example.org/x.png">x</a>');
  });
});

describe('texts', () => {
  const rendered = (source: string, more = {}) => body(reportHtml(notebook(code('x'), text(source, more)), more));

  it('show HTML as text and refuse addresses that run something', () => {
    expect(rendered('a <script>alert(1)</script> <img src=x onerror=alert(1)>')).not.toMatch(/<script|<img/);
    expect(rendered('[x](javascript:alert(1)) ![y](javascript:alert(2))')).not.toMatch(/(href|src)="javascript/);
  });

  it('set formulas as MathML, leave prices and code alone', () => {
    expect(rendered('law $t \\propto M^{-2.5}$ here')).toMatch(/law <math>.*<\/math> here/);
    expect(rendered('$$\na_1 * b_2 * c\n$$')).toMatch(/<math display="block"/);
    expect(rendered('from $5 to $6')).toContain('from $5 to $6');
    expect(rendered('a $ b $ c')).toContain('a $ b $ c');
    expect(rendered('`$x$`')).toContain('<code>$x$</code>');
    expect(rendered('\\$x$')).toContain('$x$');
    expect(rendered('$\\frac{1}$')).toContain('\\frac');
    expect(rendered('$\\href{javascript:alert(1)}{x}$')).not.toContain('href="javascript');
  });

  it('show attached pictures, pictures at hand, and name the others', () => {
    const attachments = { 'a b.png': { 'image/png': 'QUJD\n' } };
    const page = reportHtml(
      notebook(text('![one](attachment:a%20b.png) ![two](c.png) ![<3>](d.png)', { attachments })),
      {
        picture: (address) => (address === 'c.png' ? 'data:image/png;base64,Y' : null),
      },
    );
    expect(page).toContain('<img alt="one" src="data:image/png;base64,QUJD">');
    expect(page).toContain('<img alt="two" src="data:image/png;base64,Y">');
    expect(page).toContain('<a href="d.png">&lt;3&gt;</a>');
  });
});

describe('code and outputs', () => {
  const output = (...outputs: Parameters<typeof notebook>[0]['outputs'] & object) =>
    body(reportHtml(notebook(code('const x = 1 < 2; // </code><script>', ...outputs))));

  it('folds code, escaped and numbered', () => {
    const page = output();
    expect(page).toMatch(/<details class="code"><summary>Code \[\d+\]<\/summary>/);
    expect(page).toContain('const x = 1 &lt; 2; // &lt;/code&gt;&lt;script&gt;');
    expect(body(reportHtml(notebook(code('  '), { cell_type: 'raw', source: 'raw' })))).toBe('');
  });

  it('takes the best form of a bundle', () => {
    expect(output(html('<b>bold</b>'))).toContain('<div class="output"><b>bold</b></div>');
    expect(output(shown({ 'image/png': 'QQ==\n', 'text/plain': '<p>' }))).toContain(
      '<img alt="&lt;p&gt;" src="data:image/png;base64,QQ==">',
    );
    expect(output(shown({ 'image/svg+xml': ['<svg>', '</svg>'], 'image/png': 'Q' }))).toContain(
      `src="data:image/svg+xml;base64,${Buffer.from('<svg></svg>').toString('base64')}"`,
    );
    expect(output(shown({ 'text/markdown': '**b** <i>' }))).toContain('<strong>b</strong> &lt;i&gt;');
    expect(output(shown({ 'text/latex': '$x$' }))).toContain('<math>');
    expect(output(shown({ 'text/plain': '<i>' }))).toContain('<pre class="output">&lt;i&gt;</pre>');
    expect(output(shown({ 'application/json': { a: '<' } }))).toContain('{\n &quot;a&quot;: &quot;&lt;&quot;\n}');
    expect(output(shown({ 'text/html': '', 'text/plain': '' }))).not.toContain('class="output"');
  });
});

describe('Plotly', () => {
  const figure = `<div data-fig="1"></div><script>f(${JSON.stringify(loaderKey())})</script>`;
  const loaders = (page: string) => page.split(' data-plotly=').length - 1;

  it('is carried once for any number of loaders in the notebook', () => {
    const page = reportHtml(
      notebook(
        code('a', html(plotlyLoader()), html(figure)),
        code('b', html(`${figure}${plotlyLoader()}`), html(figure)),
      ),
    );
    expect(loaders(page)).toBe(1);
    expect(page.split('data-fig="1"').length - 1).toBe(3);
    expect(page.indexOf(' data-plotly=')).toBeGreaterThan(page.indexOf('</main>'));
  });

  it('is given to figures whose loader was lost, and not to a report without figures', () => {
    const loader = { key: loaderKey(), html: plotlyLoader() };
    expect(loaders(reportHtml(notebook(code('a', html(figure))), { loader }))).toBe(1);
    expect(loaders(reportHtml(notebook(code('a', html(figure))), {}))).toBe(0);
    expect(loaders(reportHtml(notebook(code('a', html('<b>1</b>'))), { loader }))).toBe(0);
  });
});

describe('what is not a notebook', () => {
  it('is named', () => {
    expect(() => parseNotebook('exportReport', 'a.ipynb', '{')).toThrow(/^exportReport: a\.ipynb is not a notebook: /);
    expect(() => parseNotebook('f', 'a', '{"cells":[],"nbformat":3}')).toThrow(/format 4 \(found nbformat 3\)/);
    expect(() => parseNotebook('f', 'a', 'null')).toThrow(/found no nbformat/);
    expect(() => reportHtml(notebook(), { titel: 'x' } as never)).toThrow(/unknown option "titel".*"title"/);
  });
});
