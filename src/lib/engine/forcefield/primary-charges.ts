/** Primary charges: formal charges spread over the atoms that share them (MMFF94 part II, table II). */
import { AtomType } from './atom-types';
import { azoliumNitrogens, cationicNitrogens } from './delocalized-cations';
import type { Structure } from './structure';
import { unsupported } from './typing';

const NITROGEN = 7;
/** Types below these are neutral unless named; monatomic ions have the types from 87 on. */
const FIRST_ION_TYPE = 87;

const CHARGED_TYPES: ReadonlySet<number> = new Set([
  AtomType.terminalOxygen,
  AtomType.terminalSulfur,
  AtomType.oxideOxygen,
  AtomType.anionicNitrogen,
  AtomType.anionicRingNitrogen,
  AtomType.ammoniumNitrogen,
  AtomType.oxoniumOxygen,
  AtomType.oxeniumOxygen,
  AtomType.iminiumNitrogen,
  AtomType.amidiniumNitrogen,
  AtomType.guanidiniumNitrogen,
  AtomType.pyridiniumNitrogen,
  AtomType.diazoniumNitrogen,
  AtomType.imidazoliumNitrogen,
]);

/**
 * The primary charges, one an atom; their sum is the molecule's charge.
 * @throws InputError `unsupported-environment` where a charge sits on a type that MMFF94 takes as neutral
 */
export function primaryCharges(structure: Structure, types: Readonly<Int32Array>): Float64Array {
  const charges = Float64Array.from(structure.charges);
  for (let atom = 0; atom < types.length; atom++) {
    spreadOverTerminals(structure, types, charges, atom);
    neutralizePair(structure, types, charges, atom);
  }
  for (const ring of structure.aromaticRings) {
    spread(
      charges,
      ring.filter((atom) => types[atom] === AtomType.anionicRingNitrogen),
    );
  }
  for (const group of delocalizedCations(structure)) spread(charges, group);
  for (let atom = 0; atom < types.length; atom++) {
    const mayBeCharged = types[atom] >= FIRST_ION_TYPE || CHARGED_TYPES.has(types[atom]);
    if (charges[atom] !== 0 && !mayBeCharged) throw unsupported(structure, atom);
  }
  return charges;
}

/** Gives each atom the mean of the atoms' charges. */
function spread(charges: Float64Array, atoms: readonly number[]): void {
  const total = atoms.reduce((sum, atom) => sum + charges[atom], 0);
  for (const atom of atoms) charges[atom] = total / atoms.length;
}

/** The terminal oxygens and sulfurs of one center share their charge, and take up that of an oxidized nitrogen. */
function spreadOverTerminals(
  structure: Structure,
  types: Readonly<Int32Array>,
  charges: Float64Array,
  center: number,
): void {
  const terminal = structure.neighbors[center]
    .map((neighbor) => neighbor.atom)
    .filter(
      (atom) => types[atom] === AtomType.terminalOxygen || types[atom] === AtomType.terminalSulfur,
    );
  if (terminal.length === 0) return;
  if (structure.elements[center] === NITROGEN) {
    charges[terminal[0]] += charges[center];
    charges[center] = 0;
  }
  spread(charges, terminal);
}

/** =N⁺=N⁻ and –N⁺≡C⁻ count as neutral. */
function neutralizePair(
  structure: Structure,
  types: Readonly<Int32Array>,
  charges: Float64Array,
  atom: number,
): void {
  if (types[atom] !== AtomType.terminalAzideNitrogen && types[atom] !== AtomType.isonitrileCarbon) {
    return;
  }
  spread(charges, [atom, structure.neighbors[atom][0].atom]);
}

/** Groups of nitrogens that share a positive charge; those with a nitrogen in common are one group. */
function delocalizedCations(structure: Structure): number[][] {
  const found = [
    ...structure.neighbors.map((_, atom) => cationicNitrogens(structure, atom)),
    ...structure.aromaticRings
      .filter((ring) => ring.length === 5)
      .map((ring) => azoliumNitrogens(structure, ring)),
  ];
  let groups: number[][] = [];
  for (const group of found) {
    const touching = groups.filter((other) => other.some((atom) => group.includes(atom)));
    const merged = [...new Set([...touching.flat(), ...group])];
    groups = [...groups.filter((other) => !touching.includes(other)), merged];
  }
  return groups;
}
