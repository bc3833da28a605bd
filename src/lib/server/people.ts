/** The people of a team as notes name them. */
import type { Person } from '../domain/notes';
import { listMembers } from './memberships';
import type { Member } from './member';

/** Everybody in the team by name; two who share a name are told apart by their addresses. */
export async function listPeople(member: Member): Promise<Person[]> {
  const members = await listMembers(member);
  const folded = members.map(({ name }) => name.toLowerCase());
  return members
    .map(({ id, name, email }) => {
      const isShared = folded.filter((other) => other === name.toLowerCase()).length > 1;
      return { id, name, handle: isShared ? email : name };
    })
    .sort((a, b) => a.handle.localeCompare(b.handle, 'en'));
}
