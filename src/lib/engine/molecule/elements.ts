/** The periodic table as far as reading a structure needs it. */

/** Symbols by atomic number; entry 0 is empty. */
export const ELEMENT_SYMBOLS: readonly string[] =
  `. H He Li Be B C N O F Ne Na Mg Al Si P S Cl Ar K Ca Sc Ti V Cr Mn Fe Co Ni Cu Zn Ga Ge As Se Br Kr
   Rb Sr Y Zr Nb Mo Tc Ru Rh Pd Ag Cd In Sn Sb Te I Xe Cs Ba La Ce Pr Nd Pm Sm Eu Gd Tb Dy Ho Er Tm Yb Lu
   Hf Ta W Re Os Ir Pt Au Hg Tl Pb Bi Po At Rn Fr Ra Ac Th Pa U Np Pu Am Cm Bk Cf Es Fm Md No Lr
   Rf Db Sg Bh Hs Mt Ds Rg Cn Nh Fl Mc Lv Ts Og`
    .split(/\s+/)
    .map((symbol) => (symbol === '.' ? '' : symbol));

const NUMBERS = new Map(ELEMENT_SYMBOLS.map((symbol, number) => [symbol, number]));
NUMBERS.delete('');

/** Atomic number of an element symbol as it is written (Cl, not CL); 0 when there is no such element. */
export function atomicNumberOf(symbol: string): number {
  return NUMBERS.get(symbol) ?? 0;
}

const NOBLE_GASES = [2, 10, 18, 36, 54, 86];

/** Valence electrons of a main-group element; -1 for transition metals, lanthanides and actinides. */
function valenceElectrons(atomicNumber: number): number {
  if (atomicNumber <= 2) return atomicNumber;
  const core = NOBLE_GASES.filter((gas) => gas < atomicNumber).at(-1) ?? 0;
  const group = atomicNumber - core;
  if (group <= 2 || atomicNumber <= 18) return group;
  if (core < 54) return group > 12 ? group - 10 : -1;
  return core < 86 && group > 26 ? group - 24 : -1;
}

/**
 * The valences an atom may have, lowest first: as many bonds as its valence electrons pair up, and from the third
 * period on two more for every pair it can part. Charged atoms follow the element with the same number of
 * electrons (N+ as C). Null where the octet says nothing (transition metals and the like).
 */
export function allowedValences(atomicNumber: number, charge: number): readonly number[] | null {
  const neutral = valenceElectrons(atomicNumber);
  if (neutral < 0) return null;
  const electrons = neutral - charge;
  if (atomicNumber <= 2) return electrons < 0 || electrons > 2 ? [] : [electrons === 1 ? 1 : 0];
  if (electrons < 0 || electrons > 8) return [];
  if (electrons <= 4) return [electrons];
  const valences = [8 - electrons];
  if (atomicNumber > 10) {
    while (valences[valences.length - 1] + 2 <= electrons) {
      valences.push(valences[valences.length - 1] + 2);
    }
  }
  return valences;
}

/** Element and number as people read it: C2 is the second atom of the molecule, a carbon. */
export function atomLabel(atomicNumber: number, atom: number): string {
  return `${ELEMENT_SYMBOLS[atomicNumber]}${atom + 1}`;
}
