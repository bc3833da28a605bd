/** Compiles parameterized interactions into energy, curvature and energies by term. */
import type { CurvatureTerm, EnergyTerm } from '../energy-term';
import type { Dielectric, ForceField, TermEnergies } from './forcefield';
import type { Interactions } from './interactions';
import { angleCurvature, angleTerm } from './terms/angle';
import { bondCurvature, bondTerm } from './terms/bond';
import { electrostaticTerm } from './terms/electrostatic';
import { outOfPlaneCurvature, outOfPlaneTerm } from './terms/out-of-plane';
import { stretchBendTerm } from './terms/stretch-bend';
import { torsionCurvature, torsionTerm } from './terms/torsion';
import { vanDerWaalsTerm } from './terms/van-der-waals';
import { compiledEnergy } from './webassembly/energy';

/** What a force field computes, compiled from parameterized interactions alone. */
export type CompiledInteractions = Pick<ForceField, 'energy' | 'curvature' | 'terms'>;

/** Compiles parameterized interactions into energy, curvature and energies by term. */
export function compileInteractions(
  atomCount: number,
  interactions: Interactions,
  dielectric: Dielectric,
): CompiledInteractions {
  const parts = {
    bond: bondTerm(interactions.bonds),
    angle: angleTerm(interactions.angles),
    stretchBend: stretchBendTerm(interactions.stretchBends),
    outOfPlane: outOfPlaneTerm(interactions.outOfPlanes),
    torsion: torsionTerm(interactions.torsions),
    vanDerWaals: vanDerWaalsTerm(interactions.vanDerWaals),
    electrostatic: electrostaticTerm(interactions.electrostatics, dielectric),
  };
  const compiled = compiledEnergy(atomCount, interactions, dielectric);
  const linear = linearAngles(interactions.angles);
  const energy: EnergyTerm = linear
    ? (x, gradient) => compiled(x, gradient) + linear(x, gradient)
    : compiled;
  return { energy, curvature: compileCurvature(interactions), terms: (x) => evaluate(parts, x) };
}

/** The term of the angles with a linear vertex; null where there are none, as almost always. */
function linearAngles({ atoms, angle, force, linear }: Interactions['angles']): EnergyTerm | null {
  const chosen = Array.from(linear.keys()).filter((n) => linear[n] !== 0);
  if (chosen.length === 0) return null;
  return angleTerm({
    atoms: Int32Array.from(chosen.flatMap((n) => [...atoms.subarray(3 * n, 3 * n + 3)])),
    angle: Float64Array.from(chosen, (n) => angle[n]),
    force: Float64Array.from(chosen, (n) => force[n]),
    linear: Uint8Array.from(chosen, () => 1),
  });
}

function evaluate(
  parts: Readonly<Record<keyof TermEnergies, EnergyTerm>>,
  x: Float64Array,
): TermEnergies {
  const unused = new Float64Array(x.length);
  return {
    bond: parts.bond(x, unused),
    angle: parts.angle(x, unused),
    stretchBend: parts.stretchBend(x, unused),
    outOfPlane: parts.outOfPlane(x, unused),
    torsion: parts.torsion(x, unused),
    vanDerWaals: parts.vanDerWaals(x, unused),
    electrostatic: parts.electrostatic(x, unused),
  };
}

function compileCurvature(interactions: Interactions): CurvatureTerm {
  const bonds = bondCurvature(interactions.bonds);
  const angles = angleCurvature(interactions.angles);
  const outOfPlanes = outOfPlaneCurvature(interactions.outOfPlanes);
  const torsions = torsionCurvature(interactions.torsions);
  return (x, hessian) => {
    bonds(x, hessian);
    angles(x, hessian);
    outOfPlanes(x, hessian);
    torsions(x, hessian);
  };
}
