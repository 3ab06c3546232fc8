import { type LeastSquaresKind, leastSquaresLine } from '../numeric/regression/least-squares';
import { studentLine } from '../numeric/regression/student-t';
import { theilSenLine } from '../numeric/regression/theil-sen';
import { type ErrorPoints, yorkInto } from '../numeric/regression/york';

/** How the lines of a relation are fitted. */
export type RelationMethod =
  | 'posterior'
  | 'errors-in-both-axes'
  | 'y-on-x'
  | 'x-on-y'
  | 'bisector'
  | 'theil-sen'
  | 'student-t';

/** Every method, the default first. */
export const RELATION_METHODS: readonly RelationMethod[] = [
  'posterior',
  'errors-in-both-axes',
  'y-on-x',
  'x-on-y',
  'bisector',
  'theil-sen',
  'student-t',
];

/** What each method is, with its source, for results. */
export const METHOD_WORDS: Readonly<Record<RelationMethod, string>> = {
  posterior: 'posterior of a broken line with errors in both axes and intrinsic scatter (Kelly 2007)',
  'errors-in-both-axes': 'errors in both axes, no intrinsic scatter (York et al. 2004)',
  'y-on-x': 'ordinary least squares of y on x (Isobe et al. 1990)',
  'x-on-y': 'ordinary least squares of x on y (Isobe et al. 1990)',
  bisector: 'bisector of the two ordinary least-squares lines (Isobe et al. 1990)',
  'theil-sen': 'median of all pair slopes (Theil-Sen; Sen 1968)',
  'student-t': 'Student-t residuals of 3 degrees of freedom, x errors folded in (Lange et al. 1989)',
};

/** Whether a method weighs stars by their errors, and so needs them. */
export function needsErrors(method: RelationMethod): boolean {
  return method === 'posterior' || method === 'errors-in-both-axes' || method === 'student-t';
}

/** A straight line through chosen points. */
export interface PlainLine {
  readonly slope: number;
  readonly intercept: number;
}

/**
 * The line of a method through the points at the given rows (a row may occur more than once).
 * @returns null where the points define no such line
 */
export function lineThrough(
  method: Exclude<RelationMethod, 'posterior'>,
  points: ErrorPoints,
  rows: Uint32Array,
): PlainLine | null {
  const { x, y, xError, yError } = points;
  const correlation = points.correlation ?? new Float64Array(x.length);
  if (method === 'errors-in-both-axes') {
    return yorkInto(x, y, xError, yError, correlation, rows, rows.length, YORK_OUT)
      ? { slope: YORK_OUT[0], intercept: YORK_OUT[1] }
      : null;
  }
  const xs = Float64Array.from(rows, (i) => x[i]);
  const ys = Float64Array.from(rows, (i) => y[i]);
  if (xs.every((v) => v === xs[0])) return null;
  if (method === 'theil-sen') return theilSenLine(xs, ys);
  if (method !== 'student-t') {
    if (method !== ('y-on-x' satisfies LeastSquaresKind) && ys.every((v) => v === ys[0])) return null;
    return leastSquaresLine(xs, ys, method);
  }
  let line: PlainLine = leastSquaresLine(xs, ys, 'y-on-x');
  // The x errors count through the slope, so slope and errors settle together.
  for (let round = 0; round < 4; round++) {
    const errors = Float64Array.from(rows, (i) => residualError(line.slope, xError[i], yError[i], correlation[i], 0));
    line = studentLine(xs, ys, errors);
  }
  return line;
}

const YORK_OUT = new Float64Array(6);

/** Standard deviation of y - slope x about the line. NaN errors count as none. */
export function residualError(
  slope: number,
  xError: number,
  yError: number,
  correlation: number,
  scatter: number,
): number {
  const sx = xError || 0;
  const sy = yError || 0;
  return Math.sqrt(
    Math.max(0, sy * sy + slope * slope * sx * sx - 2 * slope * correlation * sx * sy) + scatter * scatter,
  );
}
