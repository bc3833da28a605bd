/** An invented library for searches: every core with every pair of groups. */

const cores = [
  'c1cc(A)ccc1B',
  'c1cc(A)ncc1B',
  'C1CC(A)CCC1B',
  'c1c(A)sc(B)c1',
  'C(A)C(=O)NB',
  'AC=CC=CB',
  'C1CN(A)CCN1B',
  'AC(=O)OCB',
  'c1ccc2c(A)cc(B)cc2c1',
  'AC#CB',
];
const groups = ['C', 'CC', 'OC', 'C(F)(F)F', 'c9ccccc9', 'CCl', 'C(=O)N(C)C', 'C9CC9'];

/** The first `count` SMILES of the library, all different as texts; with chains of growing length when it runs out. */
export function librarySmiles(count: number): string[] {
  const found: string[] = [];
  for (let chain = 0; found.length < count; chain++) {
    for (const core of cores) {
      for (const a of groups) {
        for (const b of groups) {
          if (found.length >= count) return found;
          found.push(core.replace('A', a).replace('B', `${'C'.repeat(chain)}${b}`));
        }
      }
    }
  }
  return found;
}
