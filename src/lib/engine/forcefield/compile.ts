/** Compiles parameterized interactions into energy, curvature and energies by term. */
import type { CurvatureTerm, EnergyTerm } from '../energy-term';
import type { Dielectric, ForceField, TermEnergies } from './forcefield';
import type { Interactions } from './interactions';
import { angleCurvature, angleTerm } from './terms/angle';
import { bondCurvature, bondTerm } from './terms/bond';
import { electrostaticTerm } from './terms/electrostatic';
import { nonbondedTerm } from './terms/nonbonded';
import { outOfPlaneCurvature, outOfPlaneTerm } from './terms/out-of-plane';
import { stretchBendTerm } from './terms/stretch-bend';
import { torsionCurvature, torsionTerm } from './terms/torsion';
import { vanDerWaalsTerm } from './terms/van-der-waals';

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
  const { bond, angle, stretchBend, outOfPlane, torsion } = parts;
  const nonbonded = nonbondedTerm(atomCount, interactions, dielectric);
  const energy: EnergyTerm = (x, gradient) =>
    bond(x, gradient) +
    angle(x, gradient) +
    stretchBend(x, gradient) +
    outOfPlane(x, gradient) +
    torsion(x, gradient) +
    nonbonded(x, gradient);
  return { energy, curvature: compileCurvature(interactions), terms: (x) => evaluate(parts, x) };
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
