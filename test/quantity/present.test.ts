import { inspect } from 'node:util';
import { afterEach, describe, expect, it } from 'vitest';
import { measuredFromSigma } from '../../kernel-lib/quantity/measured';
import {
  escapeHtml,
  htmlTable,
  presentable,
  presentationOf,
  setPresenter,
  textTable,
} from '../../kernel-lib/quantity/present';

afterEach(() => setPresenter(null));

describe('present', () => {
  it('shows tidy text in a terminal and leaves the visible keys alone', () => {
    const result = presentable({ a: 1 }, { text: () => 'one', html: () => '<b>one</b>' });
    expect(inspect(result)).toBe('one');
    expect(String(result)).toBe('one');
    expect(JSON.stringify(result)).toBe('{"a":1}');
    expect(Object.isFrozen(result)).toBe(true);
    expect(presentationOf(result)?.html()).toBe('<b>one</b>');
    expect(presentationOf(3)).toBeNull();
  });

  it('calls the presenter for the outermost object only', () => {
    const seen: object[] = [];
    setPresenter((shown) => {
      seen.push(shown);
      return 'rich';
    });
    const m = measuredFromSigma(1, 0.1);
    expect(inspect(m)).toBe('rich');
    expect(inspect({ m })).toBe('{ m: 1.00 ± 0.10 }');
    expect(seen).toEqual([m]);
  });

  it('shows text full of markup as text', () => {
    const hostile = '<script>alert("x")</script>\'&';
    expect(escapeHtml(hostile)).toBe('&lt;script&gt;alert(&quot;x&quot;)&lt;/script&gt;&#39;&amp;');
    expect(htmlTable([hostile], [[hostile]], { caption: hostile })).not.toContain('<script');
    expect(textTable(['a', 'b'], [['longer', 1]])).toBe('a       b\nlonger  1');
  });
});
