/** Timing for the bench: processor time, best of several passes, so that what else the machine does counts least. */

/** Fewest passes, and the least time spent on them, seconds: short work needs many before it is compiled well. */
const PASSES = 3;
const TIME_SPENT = 1;

/** Processor time of this process so far, seconds; compiling and collecting garbage count too. */
export function processorSeconds(): number {
  const { user, system } = process.cpuUsage();
  return (user + system) / 1e6;
}

export interface Timed<Value> {
  /** Seconds of the fastest pass. */
  seconds: number;
  /** What the last pass returned. */
  value: Value;
}

/** Runs `work` once unmeasured and then several times. */
export async function fastest<Value>(work: () => Promise<Value> | Value): Promise<Timed<Value>> {
  let value = await work();
  let seconds = Infinity;
  let spent = 0;
  for (let pass = 0; pass < PASSES || spent < TIME_SPENT; pass++) {
    const start = processorSeconds();
    value = await work();
    const taken = processorSeconds() - start;
    seconds = Math.min(seconds, taken);
    spent += taken;
  }
  return { seconds, value };
}

/** Milliseconds with three figures. */
export function milliseconds(seconds: number): string {
  return (seconds * 1000).toPrecision(3);
}
