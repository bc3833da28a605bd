/** The torsions of a molecule with their parameters. */
import type { Neighbor } from '../molecule/molecule';
import { torsionClasses } from './interaction-classes';
import type { Interactions } from './interactions';
import type { Parameterization } from './parameterization';
import { findTorsion } from './torsion-parameters';
import type { Structure } from './structure';
import { estimateTorsion } from './torsion-rules';
import type { CentralBond } from './torsion-rules';
import { unsupported } from './typing';

interface TorsionPath {
  readonly atoms: readonly [number, number, number, number];
  readonly bonds: readonly [number, number, number];
}

/** Parameterizes all torsions about bonds between atoms that are not linear; those without any barrier are left out. */
export function torsionInteractions(context: Parameterization): Interactions['torsions'] {
  const parameterized = torsionPaths(context)
    .map((path) => ({ atoms: path.atoms, barriers: parameterizeTorsion(context, path) }))
    .filter(({ barriers }) => barriers.some((barrier) => barrier !== 0));
  const coefficient = (n: number): Float64Array =>
    Float64Array.from(parameterized, ({ barriers }) => barriers[n]);
  return {
    atoms: Int32Array.from(parameterized.flatMap(({ atoms }) => atoms)),
    v1: coefficient(0),
    v2: coefficient(1),
    v3: coefficient(2),
  };
}

/** Paths of four atoms once each, bond by bond. */
function torsionPaths({ structure, types, parameters }: Parameterization): TorsionPath[] {
  const isLinear = (atom: number): boolean => parameters.properties.get(types[atom])!.linear;
  return structure.molecule.bonds.flatMap(({ a: j, b: k }, central) => {
    if (isLinear(j) || isLinear(k)) return [];
    const outer = (atom: number, except: number): Neighbor[] =>
      structure.neighbors[atom].filter((neighbor) => neighbor.atom !== except);
    return outer(j, k).flatMap((first) =>
      outer(k, j)
        .filter((last) => first.atom !== last.atom)
        .map((last) => ({
          atoms: [first.atom, j, k, last.atom] as const,
          bonds: [first.bond, central, last.bond] as const,
        })),
    );
  });
}

function parameterizeTorsion(
  { structure, types, bondClasses, parameters }: Parameterization,
  { atoms, bonds }: TorsionPath,
): readonly number[] {
  const [left, central, right] = bonds;
  const classes = torsionClasses(
    structure,
    types,
    atoms,
    [bondClasses[left], bondClasses[central], bondClasses[right]],
    central,
  );
  const [i, j, k, l] = atoms;
  const found = findTorsion(parameters, classes, [types[i], types[j], types[k], types[l]]);
  if (found) return found;
  const estimated = estimateTorsion({
    j: parameters.properties.get(types[j])!,
    k: parameters.properties.get(types[k])!,
    kind: bondKind(structure, central),
  });
  if (!estimated) throw unsupported(structure, j);
  return estimated;
}

function bondKind(structure: Structure, bond: number): CentralBond['kind'] {
  if (structure.aromaticBonds[bond]) return 'aromatic';
  return (['single', 'double', 'triple'] as const)[structure.orders[bond] - 1];
}
