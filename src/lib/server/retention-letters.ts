/** What letters say before results are removed for their age. */
import { compose } from './letters';
import type { Letter } from './mail';

/** Batches that a letter names; of more it tells the number. */
const NAMED = 40;

/** A day as letters write it: "15 December 2026". */
export function dayText(moment: Date): string {
  return new Intl.DateTimeFormat('en-GB', {
    day: 'numeric',
    month: 'long',
    year: 'numeric',
    timeZone: 'UTC',
  }).format(moment);
}

export function removalLetter(given: {
  readonly person: { readonly name: string };
  readonly team: string;
  readonly batches: readonly { readonly name: string }[];
  readonly removal: Date;
}): Letter {
  const { person, team, batches, removal } = given;
  const day = dayText(removal);
  const further = batches.length - NAMED;
  return compose({
    subject: `Results of ${team} will be removed on ${day}`,
    greeting: `Hello ${person.name},`,
    lines: [
      `Results in ${team} have nearly reached the age up to which the team keeps them. On ${day} the results of these batches will be removed. The batches stay listed and can be run again.`,
      'To keep a batch, pin it on its page: a modeler or a lead of the team may. What a pinned or a younger batch shares with them stays as well.',
    ],
    lists: [
      {
        title: 'What will go',
        items: [
          ...batches.slice(0, NAMED).map(({ name }) => name),
          ...(further > 0 ? [`and ${further} more`] : []),
        ],
      },
    ],
    link: { label: 'Look at the batches', path: '/batches' },
    closing: 'A lead can raise the months on the page of the team’s limits; then nothing goes.',
  });
}
