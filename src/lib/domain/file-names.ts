/** Names of files that are safe on every system and unique in their folder. */

const LONGEST = 60;
/** Names that Windows keeps for devices. */
const RESERVED = /^(con|prn|aux|nul|com\d|lpt\d)$/i;

/** A name of letters, digits, dots, dashes and underscores made of any text. */
export function safeName(text: string, fallback = 'molecule'): string {
  const plain = text
    .normalize('NFKD')
    .replace(/[^\w.-]+/g, '_')
    .replace(/^[._-]+|[._-]+$/g, '')
    .slice(0, LONGEST)
    .replace(/[._-]+$/, '');
  if (plain === '') return fallback;
  return RESERVED.test(plain) ? `${plain}_` : plain;
}

/** Gives out names, each once; a second "a" becomes "a-2". Case does not tell names apart. */
export function createNamer(): (text: string) => string {
  const taken = new Set<string>();
  return (text) => {
    const base = safeName(text);
    let name = base;
    for (let n = 2; taken.has(name.toLowerCase()); n++) name = `${base}-${n}`;
    taken.add(name.toLowerCase());
    return name;
  };
}
