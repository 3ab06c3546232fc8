import { checkOptions } from '../quantity/options';
import { baseLayout, linearAxis, logAxis, padded } from './axes';
import { centralValue, curveTrace, halvesOf, markTrace, type NumberOrMeasured } from './curve';
import { Figure, type FigureTrace } from './figure';
import { plotText } from './plot-text';
import { finiteExtent, rounded, significant } from './rounding';
import { PALETTE, translucent } from './theme';

/** Where models put the turnoff at each age. */
export interface TurnoffCurve {
  /** Gyr, positive, shape (n), in order. */
  readonly age: ArrayLike<number>;
  /** Turnoff position, shape (n): absolute magnitude, colour, or mass. */
  readonly position: ArrayLike<number>;
  /** Name in the legend. Default `models`. */
  readonly label?: string;
}

/** Options of `ageTurnoffDiagram`. */
export interface AgeTurnoffDiagramOptions {
  /** The measured turnoff position. */
  readonly measured?: NumberOrMeasured;
  /** The age that follows from it, Gyr. */
  readonly age?: NumberOrMeasured;
  /** Vertical axis with its unit. Default `turnoff M<sub>V</sub> (mag)`. */
  readonly positionTitle?: string;
  /** Whether smaller is higher, as for magnitudes. Default true. */
  readonly brighterUp?: boolean;
  /** Default `Age from the turnoff`. */
  readonly title?: string;
}

/**
 * The turnoff's place against age by one or more models, the measured place as a band across, and the age where they meet.
 * @param curves one or more models
 * @throws TypeError for an unknown option, RangeError for a curve whose lists differ in length or no curve at all
 * @example ageTurnoffDiagram([{ age, position: turnoffMagnitude }], { measured: turnoff.magnitude, age: result.age })
 */
export function ageTurnoffDiagram(curves: readonly TurnoffCurve[], options: AgeTurnoffDiagramOptions = {}): Figure {
  const caller = 'ageTurnoffDiagram';
  checkOptions(caller, options, ['measured', 'age', 'positionTitle', 'brighterUp', 'title']);
  const {
    measured,
    age,
    positionTitle = 'turnoff M<sub>V</sub> (mag)',
    brighterUp = true,
    title = 'Age from the turnoff',
  } = options;
  if (curves.length === 0) throw new RangeError(`${caller}: give at least one curve { age, position }.`);
  for (const curve of curves) {
    if (curve.age.length !== curve.position.length) {
      throw new RangeError(
        `${caller}: a curve has ${curve.age.length} ages and ${curve.position.length} positions; give as many of each.`,
      );
    }
  }
  const data: FigureTrace[] = curves.map((curve, k) =>
    curveTrace(plotText(curve.label ?? 'models'), significant(curve.age, 5), rounded(curve.position, 4), k, {
      hoverinfo: 'name+x+y',
    }),
  );
  const ageRange = agesShown(curves, age);
  const shown = curves.flatMap((c) =>
    Array.from(c.position).filter((_, i) => c.age[i] >= ageRange[0] && c.age[i] <= ageRange[1]),
  );
  const range = padded(finiteExtent(shown, measured === undefined ? [] : [centralValue(measured)]) ?? [0, 1]);
  if (age !== undefined && measured !== undefined) {
    data.push(markTrace('this cluster', age, measured, PALETTE.azure, 'diamond', { x: 'age (Gyr)', y: 'turnoff' }));
  }
  const layout = {
    ...baseLayout(plotText(title), 480),
    xaxis: logAxis('age (Gyr)', ageRange),
    yaxis: linearAxis(positionTitle, brighterUp ? [range[1], range[0]] : range),
    shapes: [...band('y', measured), ...band('x', age)],
  };
  return new Figure(data, layout, title);
}

/** A decade and more about the age; without one, all ages of the curves. */
function agesShown(curves: readonly TurnoffCurve[], age: NumberOrMeasured | undefined): [number, number] {
  const all = finiteExtent(...curves.map((c) => Array.from(c.age).filter((a) => a > 0))) ?? [0.01, 10];
  if (age === undefined || !(centralValue(age) > 0)) return all;
  return [Math.max(all[0], centralValue(age) / 8), Math.min(all[1], centralValue(age) * 8)];
}

function band(direction: 'x' | 'y', quantity: NumberOrMeasured | undefined): object[] {
  if (quantity === undefined) return [];
  const halves = halvesOf(quantity);
  if (halves === null) return [];
  const [from, to] = [centralValue(quantity) - halves.minus, centralValue(quantity) + halves.plus];
  const look = { type: 'rect', layer: 'below', fillcolor: translucent(PALETTE.azure, 0.16), line: { width: 0 } };
  return direction === 'x'
    ? [{ ...look, x0: from, x1: to, y0: 0, y1: 1, yref: 'paper' }]
    : [{ ...look, y0: from, y1: to, x0: 0, x1: 1, xref: 'paper' }];
}
