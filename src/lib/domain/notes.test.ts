import { describe, expect, it } from 'vitest';
import { mentionedIds, newNoteSchema, storeMentions, subjectValue, writeMentions } from './notes';

const people = [
  { id: '11111111-1111-4111-8111-111111111111', name: 'Ines Vogt', handle: 'Ines Vogt' },
  { id: '22222222-2222-4222-8222-222222222222', name: 'Ines', handle: 'Ines' },
  { id: '33333333-3333-4333-8333-333333333333', name: 'A (b) $&', handle: 'A (b) $&' },
];
const [vogt, ines, odd] = people.map(({ id }) => id);

describe('mentions', () => {
  it('are stored by id, the longest name first, whatever the case', () => {
    expect(storeMentions('@ines vogt and @Ines, see a@Ines.', people)).toBe(
      `@{${vogt}} and @{${ines}}, see a@Ines.`,
    );
    expect(storeMentions('@Inesse', people)).toBe('@Inesse');
  });

  it('come back as they were written, with any signs in a name', () => {
    const text = 'ask @Ines Vogt or @A (b) $& today';
    const stored = storeMentions(text, people);
    expect(mentionedIds(stored, people)).toEqual([vogt, odd]);
    expect(writeMentions(stored, people)).toBe(text);
  });

  it('name nobody outside of the team', () => {
    const stranger = '@{44444444-4444-4444-8444-444444444444}';
    expect(mentionedIds(`${stranger} @{${ines}} @{${ines}}`, people)).toEqual([ines]);
    expect(writeMentions(stranger, people)).toBe(stranger);
  });
});

describe('what a note is about', () => {
  it('is read as it is written', () => {
    for (const subject of [
      { kind: 'molecule' },
      { kind: 'bond', atoms: [3, 12] },
      { kind: 'conformer', resultId: vogt, rank: 2 },
    ] as const) {
      const read = newNoteSchema.parse({ text: 'a', parent: '', subject: subjectValue(subject) });
      expect(read.subject).toEqual(subject);
    }
    for (const subject of ['bond:1', 'bond:1-2-3', 'conformer:x:1', 'bond:-1-2']) {
      expect(newNoteSchema.safeParse({ text: 'a', parent: '', subject }).success).toBe(false);
    }
  });
});
