/** Notes that people write about molecules: what a form may send. */
import { z } from 'zod';

export const LONGEST_NOTE = 4_000;

const text = z
  .string()
  .trim()
  .min(1, { error: 'Write something first.' })
  .max(LONGEST_NOTE, { error: `A note may have at most ${LONGEST_NOTE} characters.` });

/** What a note is about; atoms and places count from 0. */
export type NoteSubject =
  | { readonly kind: 'molecule' }
  | { readonly kind: 'bond'; readonly atoms: readonly [number, number] }
  | { readonly kind: 'conformer'; readonly resultId: string; readonly rank: number };

/** Writes a subject as the value of a choice: "molecule", "bond:1-2" or "conformer:<result>:0". */
export function subjectValue(subject: NoteSubject): string {
  switch (subject.kind) {
    case 'molecule':
      return 'molecule';
    case 'bond':
      return `bond:${subject.atoms.join('-')}`;
    case 'conformer':
      return `conformer:${subject.resultId}:${subject.rank}`;
  }
}

const subject = z.string().transform((value, context): NoteSubject => {
  if (value === 'molecule' || value === '') return { kind: 'molecule' };
  const bond = /^bond:(\d{1,3})-(\d{1,3})$/.exec(value);
  if (bond) return { kind: 'bond', atoms: [Number(bond[1]), Number(bond[2])] };
  const conformer = /^conformer:([0-9a-f-]{36}):(\d{1,5})$/.exec(value);
  if (conformer && z.uuid().safeParse(conformer[1]).success) {
    return { kind: 'conformer', resultId: conformer[1], rank: Number(conformer[2]) };
  }
  context.addIssue({ code: 'custom', message: 'Choose what the note is about from the list.' });
  return z.NEVER;
});

/** A new note, or a reply where `parent` names a thread. */
export const newNoteSchema = z.object({
  text,
  subject,
  parent: z.union([z.literal(''), z.uuid()]).transform((id) => (id === '' ? null : id)),
});
export type NewNote = z.output<typeof newNoteSchema>;

export const editedNoteSchema = z.object({ note: z.uuid(), text });
export const chosenNoteSchema = z.object({ note: z.uuid() });
export const resolvedNoteSchema = z.object({ note: z.uuid(), resolved: z.stringbool() });

/** Someone whom a note can name. */
export interface Person {
  readonly id: string;
  readonly name: string;
  /** What is written after the @: the name, or the address where two people share the name. */
  readonly handle: string;
}

const MENTION = /@\{([0-9a-f]{8}-(?:[0-9a-f]{4}-){3}[0-9a-f]{12})\}/g;

/** The people whom a stored text names, each once. */
export function mentionedIds(stored: string, people: readonly Person[]): string[] {
  const known = new Set(people.map(({ id }) => id));
  const found = [...stored.matchAll(MENTION)].map(([, id]) => id);
  return [...new Set(found)].filter((id) => known.has(id));
}

/** Turns "@Ines Vogt" into "@{her id}", so that a mention outlives a change of name. */
export function storeMentions(written: string, people: readonly Person[]): string {
  const byLength = [...people].sort((a, b) => b.handle.length - a.handle.length);
  return byLength.reduce((text, { id, handle }) => {
    const literal = handle.replace(/[.*+?^${}()|[\]\\]/g, '\\$&');
    return text.replace(
      new RegExp(`(?<![\\p{L}\\p{N}])@${literal}(?![\\p{L}\\p{N}@])`, 'giu'),
      () => `@{${id}}`,
    );
  }, written);
}

/** A stored text as its author wrote it, for changing it. */
export function writeMentions(stored: string, people: readonly Person[]): string {
  const handles = new Map(people.map(({ id, handle }) => [id, handle]));
  return stored.replace(MENTION, (token, id: string) =>
    handles.has(id) ? `@${handles.get(id)}` : token,
  );
}
