/** Seeded damage to molecule texts: what typing slips, broken files and ill will do to them. */
import type { Random } from '$lib/engine/random';

type Mutation = (text: string, random: Random) => string;

function pick<Item>(items: readonly Item[], random: Random): Item {
  return items[random.below(items.length)];
}

function spliced(text: string, at: number, removed: number, inserted: string): string {
  return text.slice(0, at) + inserted + text.slice(at + removed);
}

const smilesPieces = [
  ...'CNOPSFIBcnops()[]=#$:/\\.%+-@0123456789*~>Hh&;,!? \t\n\0é😀',
  'Cl', 'Br', 'Si', '[Fe+2]', '[C@@H]', '[nH]', '[13C]', '[Xx]', '[2H]', '[H]', '[H+]', '[C-4]', '[999C]', '[C+99]', '[]', '[C:9999999999]',
  '%99', '%', '%1', 'C1', '((', '))', '=#', '[C', '@@@', '[O-][O-]', '[CH9]', '[U]', '[CH3]', '[Na+].[Cl-]', '/C=C/', '|^1:0|', ' name', '[R1]', '[*]', '[#6]', '[c-]1cccc1',
]; // prettier-ignore

const smilesMutations: Mutation[] = [
  (text, random) => spliced(text, random.below(text.length + 1), 0, pick(smilesPieces, random)),
  (text, random) => spliced(text, random.below(text.length + 1), 1, pick(smilesPieces, random)),
  (text, random) => spliced(text, random.below(text.length + 1), 1 + random.below(3), ''),
  (text, random) => text.slice(0, random.below(text.length + 1)),
  (text, random) => text.slice(random.below(text.length + 1)),
  (text, random) => [...text].reverse().join('').slice(random.below(3)),
  (text, random) => {
    const at = random.below(text.length + 1);
    const part = text.slice(at, at + 1 + random.below(6));
    return spliced(text, at, 0, part.repeat(1 + random.below(4)));
  },
  (text, random) => {
    const a = random.below(text.length + 1);
    const b = random.below(text.length + 1);
    return text.slice(0, a) + text.slice(b);
  },
  (text, random) => text + pick(['.', '', 'C', '1'], random) + text,
  (text, random) => pick(['(', '[', 'C(', '1', 'C', '[N+]', '=', 'C1'], random).repeat(1 + random.below(300)) + text,
  (text) => text.toUpperCase(),
  (text) => text.toLowerCase(),
]; // prettier-ignore

/** One to three slips in a SMILES; `others` gives the text to splice in now and then. */
export function mutateSmiles(text: string, others: readonly string[], random: Random): string {
  let mutated = text;
  for (let n = 1 + random.below(3); n > 0; n--) {
    mutated =
      random.below(12) === 0
        ? spliced(mutated, random.below(mutated.length + 1), 2, pick(others, random))
        : pick(smilesMutations, random)(mutated, random);
  }
  return mutated;
}

const fields = [
  '', ' ', '0', '-1', '999', '9999999', 'NaN', 'Infinity', '1e308', '-1e9', 'abc', 'Xx', 'C ', 'N', 'R#', '*', 'D', 'L', 'Q', 'Fe', '0.0000', '4', '8', 'M  END', 'V3000', '$$$$', '\0', '\t', 'é',
]; // prettier-ignore

function onLine(change: (lines: string[], at: number, random: Random) => void): Mutation {
  return (text, random) => {
    const lines = text.split('\n');
    change(lines, random.below(lines.length), random);
    return lines.join('\n');
  };
}

const molfileMutations: Mutation[] = [
  onLine((lines, at) => lines.splice(at, 1)),
  onLine((lines, at) => lines.splice(at, 0, lines[at])),
  onLine((lines, at, random) => {
    const other = random.below(lines.length);
    [lines[at], lines[other]] = [lines[other], lines[at]];
  }),
  onLine((lines, at, random) => {
    lines[at] = spliced(lines[at], random.below(lines[at].length + 1), 1, pick(fields, random));
  }),
  onLine((lines, at, random) => {
    lines[at] = lines[at].slice(0, random.below(lines[at].length + 1));
  }),
  onLine((lines, at, random) => {
    const words = lines[at].split(/(\s+)/);
    words[random.below(words.length)] = pick(fields, random);
    lines[at] = words.join('');
  }),
  onLine((lines, at) => {
    lines[at] = lines[at].replace(/\d/, '7');
  }),
  onLine((lines, at) => {
    lines[at] = lines[at].replace(/-?\d+\.\d+/g, '0.0000');
  }),
  onLine((lines, at, random) => {
    lines.splice(at, 0, pick(['M  CHG  1   1   9', 'M  CHG  2   1', 'M  RAD  1   1   2', 'M  ISO  1   1 999', 'M  END', 'A    1', '> <x>', ''], random));
  }),
  (text, random) => text.slice(0, random.below(text.length + 1)),
  (text) => text.replaceAll('\n', '\r\n'),
  (text) => text.replaceAll('\n', '\r'),
  (text) => text.replace(/^ *\d+ +\d+/m, '999999'),
  (text) => text.replaceAll(' ', '\t'),
  (text) => `${text}\n$$$$\n${text}`,
  (text) => text.replaceAll(/\.\d{4}/g, '.0000'),
]; // prettier-ignore

/** One to three kinds of damage to a molfile. */
export function mutateMolfile(text: string, random: Random): string {
  let mutated = text;
  for (let n = 1 + random.below(3); n > 0; n--)
    mutated = pick(molfileMutations, random)(mutated, random);
  return mutated;
}
