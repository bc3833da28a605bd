/** Teams and who belongs to them. */
import type { Member } from './member';

/** A person in one of their teams, with the team's name: it can be handed in wherever a Member asks. */
export interface Membership extends Member {
  readonly teamName: string;
}
