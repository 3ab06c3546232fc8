import { describe, expect, it } from 'vitest';
import { runCells } from '../kernel/run-cells';

describe('variables of earlier cells', () => {
  it('are found in shorthand properties, which the stock kernel misses, and stay up to date', async () => {
    const results = await runCells([
      "import { measured } from 'coeval'; const age = 1; let shift = 2;",
      'console.log({ age, shift }.age)',
      'shift = 5; const more = { ...{ a: 1 }, shift };',
      'console.log(more.shift, { shift }.shift)',
      'const age = 7;',
      'console.log([{ age }][0].age, ((x: { age: number }) => x.age)({ age }))',
    ]);
    expect(results.map((r) => r.status)).toEqual(Array(6).fill('ok'));
    expect(results.map((r) => r.stdout)).toEqual(['', '1\n', '', '5 5\n', '', '7 7\n']);
  });
});
