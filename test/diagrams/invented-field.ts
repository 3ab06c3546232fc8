import { Catalogue } from '../../kernel-lib/catalogue/catalogue';
import { randomStream } from '../../kernel-lib/quantity/random';

/** An invented field with a cluster: the first rows are members. */
export function inventedField(count = 400, members = 100): { field: Catalogue; probability: Float64Array } {
  const random = randomStream(7);
  const each = (f: (member: boolean, i: number) => number) =>
    Float64Array.from({ length: count }, (_, i) => f(i < members, i));
  const columns = [
    { name: 'name', values: Array.from({ length: count }, (_, i) => `star <${i}> & co`) },
    { name: 'ra', values: each((m) => 130 + (m ? 0.5 : 2) * random.normal()) },
    { name: 'dec', values: each((m) => 20 + (m ? 0.5 : 2) * random.normal()) },
    { name: 'plx', values: each((m) => (m ? 5.3 + 0.1 * random.normal() : 1 + random.normal())) },
    { name: 'pmra', values: each((m) => (m ? -36 + 0.5 * random.normal() : -2 + 8 * random.normal())) },
    { name: 'pmdec', values: each((m) => (m ? -13 + 0.5 * random.normal() : -3 + 8 * random.normal())) },
    { name: 'pm_error', values: each(() => 0.05) },
    { name: 'v', values: each((_, i) => 7 + (9 * i) / count) },
    { name: 'v_error', values: each(() => 0.01) },
    { name: 'b_v', values: each((_, i) => 0.05 + (1.4 * i) / count + 0.02 * random.normal()) },
    { name: 'b_v_error', values: each(() => 0.014) },
    { name: 'log_teff', values: each((_, i) => 4 - (0.45 * i) / count) },
    { name: 'log_teff_error', values: each(() => 0.006) },
    { name: 'log_l', values: each((_, i) => 1.8 - (3.6 * i) / count + 0.03 * random.normal()) },
    { name: 'log_l_error', values: each(() => 0.03) },
  ];
  const field = new Catalogue({
    source: 'invented field',
    rowCount: count,
    columns,
    roles: {
      identifier: 'name',
      rightAscension: 'ra',
      declination: 'dec',
      parallax: 'plx',
      properMotionRa: 'pmra',
      properMotionDec: 'pmdec',
      'properMotionRa.error': 'pm_error',
      'properMotionDec.error': 'pm_error',
      'magnitude.V': 'v',
      'magnitude.V.error': 'v_error',
      'colour.B-V': 'b_v',
      'colour.B-V.error': 'b_v_error',
    },
  });
  return { field, probability: each((m) => (m ? 0.7 + 0.3 * random.uniform() : 0.3 * random.uniform())) };
}

/** An axis of a figure's layout. */
export interface AxisForTest {
  readonly type: string;
  readonly range: readonly [number, number];
  readonly title: { readonly text: string };
  readonly [key: string]: unknown;
}

export function axisOf(figure: { readonly layout: object }, key: string): AxisForTest {
  return (figure.layout as Record<string, AxisForTest>)[key];
}
