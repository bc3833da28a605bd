/** What letters say about batches that have ended. */
import type { StateCounts } from './batches';
import { compose } from './letters';
import type { Letter } from './mail';

export interface FinishedBatch {
  readonly id: string;
  readonly name: string;
  readonly team: string;
  readonly counts: StateCounts;
  /** Rows that could not be read. */
  readonly unreadable: number;
  readonly failures: readonly {
    readonly reason: string;
    readonly tasks: number;
    /** Some of the molecules, and how many there are. */
    readonly molecules: readonly string[];
    readonly names: number;
  }[];
  readonly answers: readonly { readonly name: string; readonly sentence: string }[];
  /** Molecules with an answer beyond those told. */
  readonly further: number;
}

const counted = (count: number, one: string, many = `${one}s`): string =>
  `${count} ${count === 1 ? one : many}`;

/** "12 tasks done, 2 failed, 1 cancelled". */
function countsText({ done, failed, cancelled }: StateCounts): string {
  return [
    `${counted(done, 'task')} done`,
    ...(failed > 0 ? [`${failed} failed`] : []),
    ...(cancelled > 0 ? [`${cancelled} cancelled`] : []),
  ].join(', ');
}

const CAUTION =
  'Energies are those of a gas-phase model, typically 0.5 to 2 kcal/mol off: estimates, not measurements.';
const SETTING = 'When such letters come is chosen on your account page.';

export function batchFinishedLetter(person: { name: string }, batch: FinishedBatch): Letter {
  const { name, team, counts, unreadable, failures, answers, further } = batch;
  const unread =
    unreadable > 0
      ? ` ${counted(unreadable, 'row')} could not be read and ${unreadable === 1 ? 'was' : 'were'} left out.`
      : '';
  return compose({
    subject: `“${name}” has ended${counts.failed > 0 ? `, ${counts.failed} failed` : ''}`,
    greeting: `Hello ${person.name},`,
    lines: [`Your batch “${name}” in ${team} has ended: ${countsText(counts)}.${unread}`],
    lists: [
      {
        title: 'Answers',
        items: [
          ...answers.map((answer) => `${answer.name}: ${answer.sentence}`),
          ...(further > 0 ? [`and ${counted(further, 'molecule')} more`] : []),
        ],
      },
      {
        title: 'What failed, and why',
        items: failures.map(
          ({ reason, tasks, molecules, names }) =>
            `${counted(tasks, 'task')} (${molecules.join(', ')}${names > molecules.length ? ' …' : ''}): ${reason}`,
        ),
      },
    ],
    link: { label: 'Look at the batch', path: `/batches/${batch.id}` },
    closing: `${CAUTION} ${SETTING}`,
  });
}

export function dailyLetter(
  person: { name: string },
  batches: readonly Pick<FinishedBatch, 'name' | 'team' | 'counts'>[],
): Letter {
  return compose({
    subject:
      batches.length === 1
        ? 'One of your batches has ended'
        : `${batches.length} of your batches have ended`,
    greeting: `Hello ${person.name},`,
    lines: ['Since the last daily letter these of your batches have ended.'],
    lists: [
      {
        title: 'Batches',
        items: batches.map(({ name, team, counts }) => `${name} (${team}): ${countsText(counts)}`),
      },
    ],
    link: { label: 'Look at your batches', path: '/batches' },
    closing: SETTING,
  });
}
