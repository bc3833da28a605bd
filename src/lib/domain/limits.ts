/** What a team and each of its members may use up, and how long results are kept. */
import { z } from 'zod';

export const limitNames = ['queuedTasks', 'atoms', 'megabytes', 'months'] as const;
export type LimitName = (typeof limitNames)[number];

export type Limits = Record<LimitName, number>;
/** What a lead set; what is missing is the operator's default for a team, the team's for a member. */
export type TeamLimits = Limits;
export type MemberLimits = Partial<Limits>;

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
export function limitsWithin(above: Limits, set: Partial<Limits>): Limits {
  const pick = (name: LimitName): number => Math.min(set[name] ?? above[name], above[name]);
  return {
    queuedTasks: pick('queuedTasks'),
    atoms: pick('atoms'),
    megabytes: pick('megabytes'),
    months: pick('months'),
  };
}
