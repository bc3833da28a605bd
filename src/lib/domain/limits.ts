/** What a team and each of its members may use up, and how long results are kept. */
import { z } from 'zod';

export const limitNames = ['queuedTasks', 'atoms', 'megabytes', 'months'] as const;
export type LimitName = (typeof limitNames)[number];

export type Limits = Record<LimitName, number>;
/** What a lead set; what is missing is the operator's default for a team, the team's for a member. */
export type LimitSettings = { readonly [Name in LimitName]?: number | undefined };

/** What a member can still use up. */
export interface Room {
  /** The limits in force for the member: the stricter of the team's and their own. */
  readonly limits: Limits;
  readonly left: { readonly queuedTasks: number; readonly megabytes: number };
}

/** A number with its thousands parted: "100,000". */
export function grouped(value: number): string {
  return new Intl.NumberFormat('en-US', { maximumFractionDigits: 0 }).format(value);
}

/** A number of megabytes, small ones to a tenth. */
export function amount(megabytes: number): string {
  return megabytes > 0 && megabytes < 10 ? megabytes.toFixed(1) : grouped(megabytes);
}

/** A limit, or what is used of it, with its unit: "1 month", "0.4 MB". */
export function limitText(name: LimitName, value: number): string {
  const { unit } = limitWords[name];
  const shown = name === 'megabytes' ? amount(value) : grouped(value);
  return `${shown} ${value === 1 ? unit.replace(/s$/, '') : unit}`;
}

/** What a member can still use up, in a sentence. */
export function roomText({ limits, left }: Room): string {
  const tasks = `${grouped(left.queuedTasks)} of ${grouped(limits.queuedTasks)} tasks at once`;
  const storage = `${grouped(Math.floor(left.megabytes))} of ${grouped(limits.megabytes)} MB`;
  return `Left for you: ${tasks}, ${storage}; at most ${limits.atoms} atoms in a molecule.`;
}

/** What each limit is, as pages and letters call it, with its unit. */
export const limitWords: Record<LimitName, { readonly label: string; readonly unit: string }> = {
  queuedTasks: { label: 'Tasks queued at once', unit: 'tasks' },
  atoms: { label: 'Atoms in a molecule', unit: 'atoms' },
  megabytes: { label: 'Stored results', unit: 'MB' },
  months: { label: 'Results are kept for', unit: 'months' },
};

/** One limit as a form has it: empty for none of its own. */
function limitField(ceiling: number) {
  return z
    .string()
    .trim()
    .transform((text) => (text === '' ? undefined : Number(text)))
    .pipe(
      z
        .number('Write a whole number, or leave it empty.')
        .int('Write a whole number.')
        .min(1, 'The least is 1.')
        .max(ceiling, `The most is ${ceiling}.`)
        .optional(),
    );
}

/** The limits that a lead may set, none above its ceiling. */
export function limitsFormSchema(ceilings: Limits) {
  return z.object({
    queuedTasks: limitField(ceilings.queuedTasks),
    atoms: limitField(ceilings.atoms),
    megabytes: limitField(ceilings.megabytes),
    months: limitField(ceilings.months),
  });
}

/** The limits in force: each the one that was set, else the one above, and never above that. */
export function limitsWithin(above: Limits, set: LimitSettings): Limits {
  const pick = (name: LimitName): number => Math.min(set[name] ?? above[name], above[name]);
  return {
    queuedTasks: pick('queuedTasks'),
    atoms: pick('atoms'),
    megabytes: pick('megabytes'),
    months: pick('months'),
  };
}
