import { describe, expect, it } from 'vitest';
import { readCatalogue } from '../../kernel-lib/catalogue/read/read-catalogue';
import { randomStream } from '../../kernel-lib/quantity/random';
import { bytes } from './helpers';

async function readAll(texts: readonly string[]): Promise<Float64Array> {
  // A second column, so that a cell ends at a separator as well as at a line end.
  const content = `a,b\n${texts.map((t) => `${t},${t}`).join('\n')}\n`;
  const catalogue = await readCatalogue(bytes(content));
  expect(catalogue.numbers('b')).toEqual(catalogue.numbers('a'));
  return catalogue.numbers('a');
}

function firstDifference(texts: readonly string[], found: Float64Array): string | null {
  expect(found.length).toBe(texts.length);
  for (let i = 0; i < texts.length; i++) {
    if (!Object.is(found[i], Number(texts[i]))) return `${texts[i]}: ${found[i]}`;
  }
  return null;
}

describe('numbers of a table', () => {
  it('equal Number(text) to the last bit, whatever the number of digits', async () => {
    const stream = randomStream(17);
    const digits = (n: number) => Array.from({ length: n }, () => Math.floor(stream.uniform() * 10)).join('');
    const texts: string[] = [];
    for (let i = 0; i < 300_000; i++) {
      const whole = Math.floor(stream.uniform() * 13);
      const fraction = Math.floor(stream.uniform() * 21);
      const sign = ['', '-', '+'][Math.floor(stream.uniform() * 3)];
      texts.push(`${sign}${digits(whole) || '0'}.${digits(fraction)}`);
    }
    expect(firstDifference(texts, await readAll(texts))).toBeNull();
  });

  it('equal Number(text) for shortest forms of random doubles, exponents included', async () => {
    const stream = randomStream(18);
    const words = new Uint32Array(2);
    const texts: string[] = [];
    while (texts.length < 100_000) {
      words[0] = stream.uniform() * 2 ** 32;
      words[1] = stream.uniform() * 2 ** 32;
      const v = new Float64Array(words.buffer)[0];
      if (!Number.isFinite(v)) continue;
      texts.push(Number.isInteger(v) ? v.toExponential() : String(v));
    }
    expect(firstDifference(texts, await readAll(texts))).toBeNull();
  });

  it('equal Number(text) halfway between doubles and next to powers of two', async () => {
    const texts: string[] = [];
    // An odd multiple of half a unit in the last place lies exactly between two doubles; neighbours decide the rounding.
    for (let k = 0; k < 2000; k++) {
      const m = 2n ** 53n + BigInt(2 * k + 1);
      for (let shift = 1; shift <= 9; shift++) {
        const scaled = m * 5n ** BigInt(shift);
        const s = scaled.toString().padStart(shift + 1, '0');
        const at = s.length - shift;
        texts.push(
          `${s.slice(0, at)}.${s.slice(at)}`,
          `${s.slice(0, at)}.${s.slice(at, -1)}`,
          `${s.slice(0, at)}.${s.slice(at)}1`,
        );
      }
    }
    for (let e = -30; e < 40; e++) {
      for (const d of [-2, -1, 0, 1, 2]) texts.push((2 ** e * (1 + d * 2 ** -52)).toFixed(18));
    }
    expect(firstDifference(texts, await readAll(texts))).toBeNull();
  });

  it('are read in every way that tables write them', async () => {
    const texts = [
      '5.',
      '.5',
      '-.5e3',
      '+7',
      '1E5',
      '1e-400',
      '1e400',
      '0',
      '-0',
      '-0.0',
      '007',
      '9007199254740991',
      '1e22',
      '0.1e-22',
    ];
    expect(firstDifference(texts, await readAll(texts))).toBeNull();
    const padded = await readCatalogue(bytes('a,b\n  1.5 , 2\n-3  ,  4e1 \n"5.5",  "6" \n'));
    expect([...padded.numbers('a')]).toEqual([1.5, -3, 5.5]);
    expect([...padded.numbers('b')]).toEqual([2, 40, 6]);
    const infinite = await readCatalogue(bytes('a,b\ninf,1\n-Infinity,2\n+INF,3\n'));
    expect([...infinite.numbers('a')]).toEqual([Infinity, -Infinity, Infinity]);
  });

  it('are not made of words, hexadecimals or numbers with separators', async () => {
    for (const cell of ['0x10', '1_000', '1 000', '1.2.3', '1e', 'e5', '--1', '.', '+', '12h', '1,5']) {
      const rows = Array.from({ length: 20 }, (_, i) => `${i},0`).join('\n');
      const content = bytes(`a,b\n${rows}\n"${cell}",0\n`);
      await expect(readCatalogue(content), cell).rejects.toThrow(
        `line 22, column "a": ${JSON.stringify(cell)} is not a number`,
      );
    }
  });
});

describe('star identifiers', () => {
  it('beyond 2^53 stay text, wherever the first of them stands', async () => {
    const early = await readCatalogue(bytes('source_id,ra\n5853498713190525696,1\n9007199254740993,2\n'));
    expect(early.values('source_id')).toEqual(['5853498713190525696', '9007199254740993']);
    const rows = Array.from({ length: 1000 }, (_, i) => `${i},0`).join('\n');
    const late = await readCatalogue(bytes(`source_id,ra\n${rows}\n5853498713190525697,0\n`));
    expect(late.values('source_id')[1000]).toBe('5853498713190525697');
    expect(late.values('source_id')[999]).toBe('999');
    expect((await readCatalogue(bytes('id,ra\n9007199254740991,1\n'))).numbers('id')[0]).toBe(9007199254740991);
  });

  it('of digits can be kept as text on request', async () => {
    const c = await readCatalogue(bytes('name,ra\n0012,1\n0013,2\n'), { text: ['name'] });
    expect(c.values('name')).toEqual(['0012', '0013']);
  });
});
