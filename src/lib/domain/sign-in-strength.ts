/** How strong a sign-in is, and what a team may ask of its members' sign-ins. */
import { z } from 'zod';

export const signInMethods = ['password', 'single sign-on'] as const;
export type SignInMethod = (typeof signInMethods)[number];

export interface Strength {
  readonly method: SignInMethod;
  /** True when a second factor was shown, here or (as it says) at the identity provider. */
  readonly withSecondFactor: boolean;
}

export interface TeamRequirements {
  readonly secondFactor: boolean;
  readonly singleSignOn: boolean;
}

export type Missing = 'second factor' | 'single sign-on';

/** What a sign-in lacks for a team; null when it may pass. */
export function findMissing(requires: TeamRequirements, shown: Strength): Missing | null {
  if (requires.singleSignOn && shown.method !== 'single sign-on') return 'single sign-on';
  if (requires.secondFactor && !shown.withSecondFactor) return 'second factor';
  return null;
}

const checkbox = z.stringbool({ truthy: ['on'], falsy: [''] });

/** What a lead ticks. */
export const requirementsSchema = z.object({ secondFactor: checkbox, singleSignOn: checkbox });
