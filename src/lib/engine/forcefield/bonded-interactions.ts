/** The bonds, angles, stretch-bends and out-of-plane bends of a molecule with their parameters. */
import { angleParameters } from './angle-parameters';
import { bondParameters } from './bond-parameters';
import type { BondParameters } from './bond-parameters';
import { angleClass, angleRingSize, stretchBendClass } from './interaction-classes';
import type { Interactions } from './interactions';
import { outOfPlaneForce } from './out-of-plane-parameters';
import type { Parameterization } from './parameterization';
import { stretchBendParameters } from './stretch-bend-parameters';
import { unsupported } from './typing';

type BondedInteractions = Pick<Interactions, 'bonds' | 'angles' | 'stretchBends' | 'outOfPlanes'>;

interface TypedBond extends BondParameters {
  readonly bondClass: number;
}

interface Angle {
  readonly atoms: readonly [number, number, number];
  readonly angle: number;
  readonly force: number;
  readonly isLinear: boolean;
  readonly stretchBend: {
    readonly lengths: readonly [number, number];
    readonly forces: readonly [number, number];
  } | null;
}

/** Parameterizes everything that needs at most one vertex. */
export function bondedInteractions(context: Parameterization): BondedInteractions {
  const bonds = context.structure.molecule.bonds.map((_, bond) => parameterizeBond(context, bond));
  const angles = parameterizeAngles(context, bonds);
  const bent = angles.flatMap(({ atoms, angle, stretchBend }) =>
    stretchBend ? [{ atoms, angle, ...stretchBend }] : [],
  );
  return {
    bonds: {
      atoms: Int32Array.from(context.structure.molecule.bonds.flatMap(({ a, b }) => [a, b])),
      length: Float64Array.from(bonds, ({ length }) => length),
      force: Float64Array.from(bonds, ({ force }) => force),
    },
    angles: {
      atoms: Int32Array.from(angles.flatMap(({ atoms }) => atoms)),
      angle: Float64Array.from(angles, ({ angle }) => angle),
      force: Float64Array.from(angles, ({ force }) => force),
      linear: Uint8Array.from(angles, ({ isLinear }) => Number(isLinear)),
    },
    stretchBends: {
      atoms: Int32Array.from(bent.flatMap(({ atoms }) => atoms)),
      lengthIJ: Float64Array.from(bent, ({ lengths }) => lengths[0]),
      lengthKJ: Float64Array.from(bent, ({ lengths }) => lengths[1]),
      angle: Float64Array.from(bent, ({ angle }) => angle),
      forceIJK: Float64Array.from(bent, ({ forces }) => forces[0]),
      forceKJI: Float64Array.from(bent, ({ forces }) => forces[1]),
    },
    outOfPlanes: parameterizeOutOfPlanes(context),
  };
}

function parameterizeBond(context: Parameterization, bond: number): TypedBond {
  const { structure, types, bondClasses, parameters } = context;
  const { a, b } = structure.molecule.bonds[bond];
  const typedClass = bondClasses[bond];
  const found = bondParameters(parameters, typedClass, types[a], types[b]);
  if (!found) throw unsupported(structure, a);
  return { ...found, bondClass: typedClass };
}

function parameterizeAngles(context: Parameterization, bonds: readonly TypedBond[]): Angle[] {
  const angles: Angle[] = [];
  context.structure.neighbors.forEach((neighbors, vertex) => {
    neighbors.forEach((first, n) => {
      for (const second of neighbors.slice(n + 1)) {
        angles.push(
          parameterizeAngle(
            context,
            [first.atom, vertex, second.atom],
            bonds[first.bond],
            bonds[second.bond],
          ),
        );
      }
    });
  });
  return angles;
}

function parameterizeAngle(
  { structure, types, parameters }: Parameterization,
  atoms: readonly [number, number, number],
  bondIJ: TypedBond,
  bondJK: TypedBond,
): Angle {
  const [i, j, k] = atoms;
  const ringSize = angleRingSize(structure, i, j, k);
  const typedClass = angleClass(ringSize, bondIJ.bondClass, bondJK.bondClass);
  const setting = { angleClass: typedClass, ringSize, bondIJ, bondJK };
  const found = angleParameters(parameters, types[i], types[j], types[k], setting);
  if (!found) throw unsupported(structure, j);
  // A linear vertex has no stretch-bend interaction (part I, equation 5).
  if (parameters.properties.get(types[j])!.linear) {
    return { atoms, ...found, isLinear: true, stretchBend: null };
  }
  const bendClass = stretchBendClass(typedClass, bondIJ.bondClass);
  const forces = stretchBendParameters(parameters, bendClass, types[i], types[j], types[k]);
  if (!forces) throw unsupported(structure, j);
  const stretchBend = { lengths: [bondIJ.length, bondJK.length] as const, forces };
  return { atoms, ...found, isLinear: false, stretchBend };
}

/** Each three-coordinate center bends out of plane along each of its three bonds. */
function parameterizeOutOfPlanes({
  structure,
  types,
  parameters,
}: Parameterization): Interactions['outOfPlanes'] {
  const atoms: number[] = [];
  const forces: number[] = [];
  structure.neighbors.forEach((neighbors, center) => {
    if (neighbors.length !== 3) return;
    const [a, b, c] = neighbors.map(({ atom }) => atom);
    const force = outOfPlaneForce(parameters, types[center], [types[a], types[b], types[c]]);
    if (force === undefined || force === 0) return;
    atoms.push(a, center, b, c, a, center, c, b, b, center, c, a);
    forces.push(force, force, force);
  });
  return { atoms: Int32Array.from(atoms), force: Float64Array.from(forces) };
}
