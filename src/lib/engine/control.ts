/**
 * How long work stays answerable: it reports progress, can be cancelled and can run out of time. The engine has no
 * clock of its own; whoever calls it passes one in.
 */

/** What a caller may pass to a long function. */
export interface ControlOptions {
  /** Told now and then how far the work is, 0 to 1, and what it is doing. */
  readonly report?: ((fraction: number, stage: string) => void) | undefined;
  /** Aborting it ends the work with the signal's reason within 200 ms. */
  readonly signal?: AbortSignal | undefined;
  /** A clock in milliseconds, from any origin. */
  readonly now: () => number;
  /** Lets the event loop run once, so that a message or a signal can arrive. */
  readonly breathe: () => Promise<void>;
  /** How long a search may take, ms; it then ends cleanly with what it has. */
  readonly budget?: number | undefined;
}

/** Passed down through every long function. */
export interface Control {
  /** True when a pause is due; cheap enough for an inner loop. */
  due(): boolean;
  /** Lets the event loop run; throws the signal's reason when the work was cancelled. */
  pause(): Promise<void>;
  /** True once the time budget is spent. */
  expired(): boolean;
  /** Reports progress of this part of the work, 0 to 1; dropped when the last report is a moment ago. */
  report(fraction: number, stage: string): void;
  /** A control for a part of the work, whose 0 to 1 is `from` to `to` of this one's. */
  part(from: number, to: number): Control;
}

/** Longest stretch of work between two pauses, ms; well under the 200 ms in which a cancel must act. */
const PAUSE_INTERVAL = 40;
/** Shortest time between two progress reports, ms. */
const REPORT_INTERVAL = 200;

/** Creates the control of one piece of long work. */
export function createControl(options: ControlOptions): Control {
  const { now, breathe, signal, report } = options;
  const start = now();
  let lastPause = start;
  let lastReport = -Infinity;
  let reported = 0;

  const tell = (fraction: number, stage: string): void => {
    const time = now();
    if (!report || (time - lastReport < REPORT_INTERVAL && fraction < 1)) return;
    lastReport = time;
    // Several stages estimate their shares; a bar that runs backwards would help nobody.
    reported = Math.max(reported, Math.min(1, fraction));
    report(reported, stage);
  };

  const within = (from: number, to: number): Control => ({
    due: () => now() - lastPause >= PAUSE_INTERVAL,
    pause: async () => {
      await breathe();
      lastPause = now();
      signal?.throwIfAborted();
    },
    expired: () => options.budget !== undefined && now() - start >= options.budget,
    report: (fraction, stage) => tell(from + (to - from) * fraction, stage),
    part: (partFrom, partTo) => within(from + (to - from) * partFrom, from + (to - from) * partTo),
  });
  return within(0, 1);
}

/** A control for work that nobody watches: never pauses, never expires, cannot be cancelled. */
export const unattended: Control = {
  due: () => false,
  pause: () => Promise.resolve(),
  expired: () => false,
  report: () => undefined,
  part: () => unattended,
};
