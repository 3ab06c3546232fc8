import { describe, expect, it } from 'vitest';
import { measured, measuredFromSigma } from '../../kernel-lib/quantity/measured';
import { presentationOf } from '../../kernel-lib/quantity/present';
import { clusterSummary } from '../../kernel-lib/report/cluster-summary';

const PARTS = {
  name: 'Cluster <b>9</b>',
  members: { expectedCount: measuredFromSigma(412, 9) },
  distance: {
    parallax: measuredFromSigma(1.31, 0.02, 'mas'),
    distance: measured(763, 752, 775, 'pc'),
    modulus: measured(9.41, 9.38, 9.44, 'mag'),
  },
  reddening: measuredFromSigma(0.12, 0.01, 'mag'),
  age: {
    age: measured(0.7, 0.65, 0.76, 'Gyr'),
    turnoffMass: measured(2.38, 2.3, 2.45, 'solar masses'),
    notes: ['Only 9 stars lie about the turnoff.'],
  },
};

describe('clusterSummary', () => {
  it('puts the numbers into one line that the start command can find', () => {
    const { line } = clusterSummary(PARTS);
    expect(line).toBe(
      'Result: 412 ± 9 members; distance 763 +12 -11 pc; E(B-V) 0.120 ± 0.010 mag; turnoff mass 2.38 +0.07 -0.08 solar masses; ' +
        'age 0.70 +0.06 -0.05 Gyr (each with its 68 % interval)',
    );
    expect(String(clusterSummary(PARTS)).split('\n')[0]).toBe(line);
  });

  it('says what the numbers leave out, and repeats the warnings of the age', () => {
    const { caveats } = clusterSummary({ ...PARTS, metallicity: -0.2 });
    expect(caveats.join('\n')).toMatch(/\[Fe\/H\] -0.2 was assumed/);
    expect(caveats.join('\n')).toMatch(/does not carry the error of the stellar models/);
    expect(caveats.join('\n')).toMatch(/Only 9 stars lie about the turnoff/);
  });

  it('shows names as text, and says which part is missing or unknown', () => {
    const html = presentationOf(clusterSummary(PARTS))?.html() ?? '';
    expect(html).toContain('Cluster &lt;b&gt;9&lt;/b&gt;');
    expect(html).not.toContain('<b>9');
    expect(() => clusterSummary({ ...PARTS, age: undefined } as never)).toThrow(/age is missing/);
    expect(() => clusterSummary({ ...PARTS, agee: 1 } as never)).toThrow(/unknown option "agee"/);
  });
});
