/** How much a given geometry costs above the best the molecule can do, as a whole and bond by bond. */
import { defaultConformerSearchOptions } from '../conformers/conformers';
import { searchConformers } from '../conformers/search';
import type { Control } from '../control';
import { InputError } from '../errors';
import type { ForceField, TermEnergies } from '../forcefield/forcefield';
import { minimizeToMinimum } from '../minimizer/minimize-to-minimum';
import { REPORTED_GRADIENT_RMS } from '../minimizer/minimizer';
import { relaxInPlace } from './relax-in-place';
import type { StrainOptions, StrainResult } from './strain';
import { torsionStrains } from './torsion-strain';

const MAX_EVALUATIONS = 20_000;
/** Shares of the work, for progress. */
const RELAXING_SHARE = 0.05;
const SEARCH_SHARE = 0.5;

/**
 * Strain of the molecule's own geometry. Global: the geometry relaxed in place less the lowest conformer, which is the
 * lower of a conformer search and of the free minimum that the geometry itself leads down to, so that the strain is
 * never negative. Per torsion: see torsion-strain.ts. Throws InputError 'missing-geometry' without 3-D coordinates.
 */
export async function analyzeStrain(
  forceField: ForceField,
  { tether, seed }: StrainOptions,
  control: Control,
): Promise<StrainResult> {
  const { coordinates } = forceField.molecule;
  if (!coordinates) {
    throw new InputError(
      'missing-geometry',
      'Strain is measured on a 3-D geometry, and the input has none; send a MOL or SDF record with 3-D coordinates.',
    );
  }
  const given = Float64Array.from(coordinates);
  const relaxed = await relaxInPlace(forceField, given, tether, control);
  control.report(RELAXING_SHARE, 'Searching the lowest conformer');
  const search = await searchConformers(
    forceField,
    { ...defaultConformerSearchOptions, seed },
    control.part(RELAXING_SHARE, SEARCH_SHARE),
  );
  const own = await freeMinimum(forceField, relaxed.coordinates, control);
  const lowest = own.energy < search.conformers[0].energy ? own : search.conformers[0];
  const torsions = await torsionStrains(
    forceField,
    relaxed.coordinates,
    seed,
    control.part(SEARCH_SHARE, 1),
  );
  return {
    strain: relaxed.energy - lowest.energy,
    strainTerms: difference(
      forceField.terms(relaxed.coordinates),
      forceField.terms(lowest.coordinates),
    ),
    givenEnergy: forceField.energy(given, new Float64Array(given.length)),
    relaxed,
    lowest: { coordinates: lowest.coordinates, energy: lowest.energy },
    torsions: torsions.strains,
    complete: search.settled && torsions.complete,
  };
}

async function freeMinimum(forceField: ForceField, start: Float64Array, control: Control) {
  const x = start.slice();
  const { energy } = await minimizeToMinimum(
    forceField.energy,
    x,
    {
      gradientRms: REPORTED_GRADIENT_RMS,
      maxEvaluations: MAX_EVALUATIONS,
      curvature: forceField.curvature,
      skeleton: forceField.skeleton,
    },
    control,
  );
  return { coordinates: x, energy };
}

function difference(one: TermEnergies, other: TermEnergies): TermEnergies {
  return {
    bond: one.bond - other.bond,
    angle: one.angle - other.angle,
    stretchBend: one.stretchBend - other.stretchBend,
    outOfPlane: one.outOfPlane - other.outOfPlane,
    torsion: one.torsion - other.torsion,
    vanDerWaals: one.vanDerWaals - other.vanDerWaals,
    electrostatic: one.electrostatic - other.electrostatic,
  };
}
