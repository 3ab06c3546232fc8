import { Figure } from '../diagrams/figure';
import { type Presentation, type Presenter, presentationOf, setPresenter } from '../quantity/present';
import { figureOutput } from './figure-output';
import { connectKernel, type Kernel } from './kernel';
import { createPlotlyCarrier, type PlotlyCarrier } from './plotly-loader';

/**
 * Shows values richly at once, wherever in a cell: a result with its table or figure, an array item by item, anything else as
 * the console prints it. In a terminal everything is printed as text.
 * @example for (const age of [0.5, 0.7, 0.9]) show(isochrone({ logAge: Math.log10(age * 1e9) }));
 */
export function show(...values: unknown[]): void {
  const kernel = connectKernel();
  for (const value of values) {
    if (Array.isArray(value) && value.some((item) => presentationOf(item) !== null)) {
      show(...value);
      continue;
    }
    const presentation = presentationOf(value);
    if (kernel === null || presentation === null) console.log(value);
    else emit(kernel, carrierOf(kernel), value as object, presentation);
  }
}

/** Makes results show themselves as the last expression of a cell. Does nothing outside a kernel. */
export function startDisplay(): void {
  const kernel = connectKernel();
  if (kernel !== null) setPresenter(presenterFor(kernel, carrierOf(kernel)));
}

const carriers = new WeakMap<Kernel, PlotlyCarrier>();

function carrierOf(kernel: Kernel): PlotlyCarrier {
  const known = carriers.get(kernel);
  if (known) return known;
  const made = createPlotlyCarrier(kernel);
  carriers.set(kernel, made);
  return made;
}

/**
 * The presenter of a kernel. Only the kernel's own printing of a last expression is rich: `console.log(result)` stays text, as
 * its author wrote it.
 */
export function presenterFor(kernel: Kernel, carrier: PlotlyCarrier): Presenter {
  const presenter: Presenter = (shown, presentation) => {
    if (!kernel.isLastExpression()) return presentation.text();
    emit(kernel, carrier, shown, presentation);
    return unprinted();
  };
  // Inside an array or a record: figures are drawn all the same, other results say themselves in a line.
  presenter.nested = (shown, presentation) => {
    if (!(shown instanceof Figure)) return firstLine(presentation.text());
    if (kernel.isLastExpression()) emit(kernel, carrier, shown, presentation);
    return `Figure: ${shown.title}`;
  };
  return presenter;
}

function emit(kernel: Kernel, carrier: PlotlyCarrier, shown: object, presentation: Presentation): void {
  const text = presentation.text();
  if (!(shown instanceof Figure)) {
    kernel.display({ 'text/html': presentation.html(), 'text/plain': text });
    return;
  }
  carrier.bring();
  kernel.display({ 'text/html': figureOutput(shown), 'text/plain': text });
}

function firstLine(text: string): string {
  const end = text.indexOf('\n');
  return end < 0 ? text : `${text.slice(0, end)} ...`;
}

let marks = 0;

/**
 * A mark for the console to print in place of what was already shown richly. The very next write, which is the console's
 * own, is taken back when it is that mark.
 */
function unprinted(): string {
  const mark = `\u0002coeval ${++marks}\u0003`;
  const stream = process.stdout;
  const write = stream.write;
  stream.write = ((chunk: unknown, ...rest: unknown[]) => {
    stream.write = write;
    if (chunk === `${mark}\n`) return true;
    return (write as (...all: unknown[]) => boolean).call(stream, chunk, ...rest);
  }) as typeof stream.write;
  return mark;
}
