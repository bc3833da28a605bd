/** Teams and who belongs to them. */
import { error, type Cookies } from '@sveltejs/kit';
import type { TeamRequirements } from '../domain/sign-in-strength';
import { environment } from './environment';
import type { Member } from './member';
import { sayWhatIsMissing } from './team-requirements';

/** Names the chosen team, between visits. */
export const TEAM_COOKIE = `${environment.WINDLASS_ORIGIN.startsWith('https:') ? '__Host-' : ''}windlass-team`;
const ONE_YEAR_SECONDS = 31_536_000;

/** A person in one of their teams, with the team's name: it can be handed in wherever a Member asks. */
export interface Membership extends Member {
  readonly teamName: string;
  /** How its members must have signed in. */
  readonly requires: TeamRequirements;
  /** When the team will be deleted, where a lead asked for it. */
  readonly deletionAt?: Date | null;
}

/** The chosen team where the person belongs to it (any more), else their first; null without a team. */
export function chooseMembership(
  memberships: readonly Membership[],
  chosenTeamId: string | undefined,
): Membership | null {
  return memberships.find(({ teamId }) => teamId === chosenTeamId) ?? memberships[0] ?? null;
}

/** Keeps the chosen team between visits. */
export function rememberTeam(event: { cookies: Cookies; url: URL }, teamId: string): void {
  event.cookies.set(TEAM_COOKIE, teamId, {
    path: '/',
    maxAge: ONE_YEAR_SECONDS,
    secure: event.url.protocol === 'https:',
  });
}

/** The person and the sign-in, in a route that only signed-in people reach. */
export function whoIsSignedIn(locals: App.Locals) {
  const { user, sessionId } = locals;
  if (!user || !sessionId) error(401, 'Sign in first.');
  return { user, sessionId };
}

/** Who asks, in a route that only people with a team reach. */
export function whoAsks(locals: App.Locals): Membership {
  if (!locals.user) error(401, 'Sign in first.');
  if (locals.barred) error(403, sayWhatIsMissing(locals.barred.missing));
  if (!locals.membership) {
    error(403, 'You belong to no team at the moment. Ask the lead of a team to add you.');
  }
  return locals.membership;
}
