/** What letters say about the end of a team. */
import { compose } from './letters';
import type { Letter } from './mail';
import { dayText } from './retention-letters';

export function deletionAskedLetter(name: string, team: string, deletionAt: Date): Letter {
  return compose({
    subject: `${team} will be deleted on ${dayText(deletionAt)}`,
    greeting: `Hello ${name},`,
    lines: [
      `A lead asked that the team ${team} be deleted with all it has: batches, results, notes, links, tokens and the record. That happens on ${dayText(deletionAt)} and cannot be taken back afterwards.`,
      'Until then any lead can undo it, and download all that the team has.',
    ],
    link: { label: 'Undo it, or download everything', path: '/team/end' },
    closing: 'If the team shall end, there is nothing to do.',
  });
}

export function deletionUndoneLetter(name: string, team: string): Letter {
  return compose({
    subject: `${team} stays`,
    greeting: `Hello ${name},`,
    lines: [`A lead undid the deletion of the team ${team}. It stays as it is.`],
    link: { label: 'Open the team', path: '/team' },
    closing: 'There is nothing to do.',
  });
}

export function deletedLetter(name: string, team: string): Letter {
  return compose({
    subject: `${team} was deleted`,
    greeting: `Hello ${name},`,
    lines: [
      `The team ${team} was deleted with all it had, as a lead had asked. Your account and your other teams are as they were.`,
    ],
    link: { label: 'Open Windlass', path: '/desk' },
    closing: 'This was the last letter about this team.',
  });
}
