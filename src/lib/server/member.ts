/** Who asks: a signed-in person in one of their teams. Every query takes one. */
import { error } from '@sveltejs/kit';
import { may, type Permission, type Role } from '../domain/roles';

export interface Member {
  readonly userId: string;
  readonly teamId: string;
  readonly role: Role;
  /** Where the request came from, for the record; absent where none asks. */
  readonly address?: string;
}

/** Whose data a query reads, where it was settled before that the asker may; a partner with a link has no account. */
export type InTeam = Pick<Member, 'teamId'> & Partial<Pick<Member, 'userId'>>;

/** Throws 403 unless the member's role may do the thing. */
export function require(member: Member, permission: Permission): void {
  if (!may(member.role, permission)) {
    error(
      403,
      `Your role in this team (${member.role}) may not ${permission}. Ask a lead of the team.`,
    );
  }
}

/** Throws 404: for what is not there, and for what belongs to another team, which must look the same. */
export function notFound(what: string): never {
  error(404, `There is no such ${what} in this team.`);
}
