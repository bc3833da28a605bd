/**
 * What a password must be. Length counts, composition does not, and what everybody tries first is refused (NIST SP
 * 800-63B section 5.1.1.2; OWASP ASVS 4.0 section 2.1).
 */

export const SHORTEST_PASSWORD = 12;
/** Long enough for any phrase; a bound only keeps hashing cheap. */
export const LONGEST_PASSWORD = 128;

/** What people begin with when they must think of a password; with anything but letters around it, it stays weak. */
const commonWords = new Set(
  `password passwort passphrase welcome willkommen letmein letmeinnow iloveyou administrator admin superuser changeme
  changethis secret topsecret mysecret mypassword newpassword thepassword passwordpassword default temporary temp
  testtest testing tester testpassword guest login access master dragon monkey sunshine princess football baseball
  basketball superman batman starwars whatever trustno trustnoone shadow michael jennifer jordan charlie computer
  internet qwerty qwertz azerty qwertyuiop qwertzuiop asdfghjkl zxcvbnm yxcvbnm qazwsx qazwsxedc onetwothree
  onetwothreefour abcdefg abcdefgh abcdefghijkl spring summer autumn winter january february march april june july
  august september october november december monday tuesday wednesday thursday friday saturday sunday chemistry
  chemist molecule molecules conformer torsion windlass laboratory correcthorsebatterystaple`.split(
    /\s+/,
  ),
);

/** Rows of keys and of letters that a finger can follow. */
const runs = [
  'abcdefghijklmnopqrstuvwxyz',
  '01234567890123456789',
  'qwertyuiopasdfghjklzxcvbnm',
  'qwertzuiopasdfghjklyxcvbnm',
  'azertyuiopqsdfghjklmwxcvbn',
  '1qaz2wsx3edc4rfv5tgb6yhn7ujm',
  '1q2w3e4r5t6y7u8i9o0p',
];

const reverse = (text: string) => [...text].reverse().join('');

/** The shortest piece that the text is a repetition of; the text itself when it is none. */
function repeatedPiece(text: string): string {
  const length = (text + text).indexOf(text, 1);
  return text.slice(0, length);
}

function isRun(text: string): boolean {
  return runs.some((run) => run.includes(text) || reverse(run).includes(text));
}

function isCommon(password: string): boolean {
  const text = password.toLowerCase();
  const piece = repeatedPiece(text);
  if (piece.length <= 4 || isRun(piece) || isRun(text)) return true;
  const read = text
    .replaceAll('0', 'o')
    .replaceAll('@', 'a')
    .replaceAll('$', 's')
    .replaceAll('3', 'e');
  const words = [text, piece, read].flatMap((each) => [
    each.replace(/[^a-z]/g, ''),
    each.replace(/^[^a-z]+|[^a-z]+$/g, ''),
  ]);
  return words.some((word) => commonWords.has(word) || commonWords.has(repeatedPiece(word)));
}

/**
 * What is wrong with a new password, in a sentence; null when it will do. `known` are words that an attacker would try
 * for this person: name and address.
 */
export function findPasswordFault(password: string, known: readonly string[] = []): string | null {
  const length = [...password].length;
  if (length < SHORTEST_PASSWORD) {
    return `Use at least ${SHORTEST_PASSWORD} characters; this has ${length}. Several unrelated words do well.`;
  }
  if (length > LONGEST_PASSWORD) return `Use at most ${LONGEST_PASSWORD} characters.`;
  if (isCommon(password))
    return 'This is among the first passwords anyone would try. Choose another.';
  const text = password.toLowerCase();
  const names = known.flatMap((each) => [each.toLowerCase(), ...each.toLowerCase().split('@')]);
  const isName = names.some(
    (name) => name.length >= 4 && text.replace(name, '').replace(/[^a-z]/g, '').length < 4,
  );
  return isName ? 'This is little more than your own name or address. Choose another.' : null;
}
