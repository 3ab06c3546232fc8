/**
 * Runs a job that an interrupt (the stop button, Ctrl-C) ends early but in order: the first one sets the signal, and whatever the
 * job then returns is the result of the cell; a second one goes through and stops the cell as usual.
 *
 * The job looks at `signal.aborted` now and then. A job that computes without pause must also `await breathe()` now and then, as an
 * interrupt is heard only then.
 * @param job gets the signal; returns the result, partial when the signal was set
 * @returns what the job returns
 * @example
 * const samples = await interruptible(async (signal) => {
 *   const done = [];
 *   while (done.length < 1000 && !signal.aborted) { done.push(oneSample()); await breathe(); }
 *   return done;
 * });
 */
export async function interruptible<T>(job: (signal: AbortSignal) => T | Promise<T>): Promise<T> {
  // A listener added while the kernel runs the synchronous part of a cell would make the next interrupt kill it.
  await null;
  const controller = new AbortController();
  if (jobs.size === 0) takeOver();
  jobs.add(controller);
  try {
    return await job(controller.signal);
  } finally {
    jobs.delete(controller);
    if (jobs.size === 0) giveBack();
  }
}

/** Lets interrupts, messages and timers be handled; costs some microseconds when there are none. */
export function breathe(): Promise<void> {
  return new Promise((resolve) => setImmediate(resolve));
}

const jobs = new Set<AbortController>();
let others: NodeJS.SignalsListener[] = [];

function takeOver(): void {
  others = process.rawListeners('SIGINT') as NodeJS.SignalsListener[];
  process.on('SIGINT', onInterrupt);
  for (const listener of others) process.removeListener('SIGINT', listener);
}

function giveBack(): void {
  // Put back before ours is taken off: with no listener at all an interrupt ends the process.
  for (const listener of others) process.on('SIGINT', listener);
  process.removeListener('SIGINT', onInterrupt);
  others = [];
}

function onInterrupt(signal: NodeJS.Signals): void {
  const running = [...jobs].filter((controller) => !controller.signal.aborted);
  if (running.length > 0) {
    for (const controller of running) controller.abort();
    return;
  }
  for (const listener of others) listener(signal);
  if (others.length > 0) return;
  process.removeListener('SIGINT', onInterrupt);
  process.kill(process.pid, signal);
}
