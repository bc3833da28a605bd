/** Analyzes every conjugated single bond of a molecule. */
import { defaultConformerSearchOptions } from '../conformers/conformers';
import { searchConformers } from '../conformers/search';
import type { Control } from '../control';
import type { ForceField } from '../forcefield/forcefield';
import type { Molecule } from '../molecule/molecule';
import { torsionOfBond } from '../molecule/rotatable';
import { basinPopulations, profileAverage } from '../thermo/basins';
import { createPeriodicCurve } from '../thermo/periodic-curve';
import { profileCurve } from '../torsion/profile';
import { scanTorsion } from '../torsion/scan';
import { defaultScanOptions } from '../torsion/scan-result';
import type { ScanOptions, ScanResult, StationaryPoint } from '../torsion/scan-result';
import { turnBetween } from '../units';
import { findConjugatedBonds } from './conjugated-bonds';
import type { ConjugatedBond } from './conjugated-bonds';
import type {
  BondConjugation,
  ConjugationForm,
  ConjugationOptions,
  ConjugationResult,
} from './conjugation';
import { overlapAt, piAxis, twistAbout } from './pi-axis';

/** Share of the work that goes into the lowest conformer, for progress. */
const SEARCH_SHARE = 0.2;
/** Twist that stands for an end that has lost its plane on the way, degrees: nothing overlaps there. */
const NO_OVERLAP = 90;
/** Energies of mirror images differ by rounding only, kcal/mol. */
const SAME_ENERGY = 1e-4;

/**
 * Finds the conjugated single bonds, scans those that can turn (relaxed, 15° and finer at the stationary points) and
 * reads twist, overlap, forms and barrier from the profiles. Bonds in rings get their twist in the lowest conformer.
 */
export async function analyzeConjugation(
  forceField: ForceField,
  { temperature, seed }: ConjugationOptions,
  control: Control,
): Promise<ConjugationResult> {
  const { molecule } = forceField;
  const found = findConjugatedBonds(molecule);
  // Without conjugated bonds a geometry is shown, and no number depends on it.
  const effort = found.length > 0 ? 'normal' : 'quick';
  const searchOptions = { ...defaultConformerSearchOptions, effort, seed } as const;
  const search = await searchConformers(forceField, searchOptions, control.part(0, SEARCH_SHARE));
  const conformers = search.conformers.map(({ coordinates }) => Float64Array.from(coordinates));
  const scanned = { seed, conformers };
  const scans = await scanBonds(forceField, found, scanned, control.part(SEARCH_SHARE, 1));
  const lowest = lowestShape(search.conformers[0], [...scans.values()]);
  const bonds = found.map((bond): BondConjugation => {
    const scan = scans.get(bond.bond);
    return scan
      ? readProfile(molecule, bond, scan, lowest.energy, temperature)
      : withTwistOnly(molecule, bond, lowest.coordinates);
  });
  const complete = search.settled && bonds.every((bond) => bond.complete);
  return { bonds, lowest, complete };
}

/** Scans the bonds that can turn, all from the same known conformers, as far as time suffices; by bond index. */
async function scanBonds(
  forceField: ForceField,
  bonds: readonly ConjugatedBond[],
  known: Pick<ScanOptions, 'seed' | 'conformers'>,
  control: Control,
): Promise<Map<number, ScanResult>> {
  const { molecule } = forceField;
  const turning = bonds.filter(({ inRing }) => !inRing);
  const scans = new Map<number, ScanResult>();
  for (const [n, bond] of turning.entries()) {
    if (control.expired()) break;
    const torsion = bond.dieneTorsion ?? torsionOfBond(molecule, bond.j, bond.k);
    const options = { ...defaultScanOptions, ...known, torsion };
    const part = control.part(n / turning.length, (n + 1) / turning.length);
    scans.set(bond.bond, await scanTorsion(forceField, options, part));
  }
  return scans;
}

function withTwistOnly(molecule: Molecule, bond: ConjugatedBond, x: Float64Array): BondConjugation {
  return {
    bond: [bond.j, bond.k],
    kind: bond.kind,
    inRing: bond.inRing,
    torsion: bond.dieneTorsion,
    twist: twistOf(molecule, bond, x),
    sCis: null,
    sTrans: null,
    difference: null,
    sCisFraction: null,
    planarSCisCost: null,
    barrier: null,
    meanOverlap: null,
    profile: null,
    complete: bond.inRing,
  };
}

/** Twist from planarity of a bond in a geometry (Å, 3N), degrees 0 to 90; null where an end has no plane. */
export function twistOf(
  molecule: Molecule,
  { j, k }: { readonly j: number; readonly k: number },
  x: Float64Array,
): number | null {
  const neighborsOf = (atom: number): number[] => molecule.neighbors[atom].map((n) => n.atom);
  const axisJ = piAxis(x, j, neighborsOf(j));
  const axisK = piAxis(x, k, neighborsOf(k));
  return axisJ && axisK && twistAbout(x, j, k, axisJ, axisK);
}

/** The lowest of all shapes seen: a scan may come upon one that the search has missed. */
function lowestShape(
  conformer: { readonly coordinates: Float64Array; readonly energy: number },
  scans: readonly ScanResult[],
): { coordinates: Float64Array; energy: number } {
  let { coordinates, energy } = conformer;
  for (const { stationary } of scans) {
    for (const point of stationary) {
      if (point.energy >= energy - SAME_ENERGY) continue;
      ({ coordinates, energy } = point);
    }
  }
  return { coordinates, energy };
}

function readProfile(
  molecule: Molecule,
  bond: ConjugatedBond,
  scan: ScanResult,
  lowestEnergy: number,
  temperature: number,
): BondConjugation {
  const samples = [...scan.points, ...scan.stationary]
    .map(({ angle, energy, coordinates }) => ({
      angle,
      relative: energy - lowestEnergy,
      twist: twistOf(molecule, bond, coordinates) ?? NO_OVERLAP,
    }))
    .sort((a, b) => a.angle - b.angle);
  const energyCurve = profileCurve(scan);
  const overlapCurve = createPeriodicCurve(
    samples.map(({ angle }) => angle),
    samples.map(({ twist }) => overlapAt(twist)),
  );
  const minima = scan.stationary.filter(({ kind }) => kind === 'minimum');
  const form = (point: StationaryPoint | null): ConjugationForm | null =>
    point && {
      angle: point.angle,
      twist: twistOf(molecule, bond, point.coordinates) ?? NO_OVERLAP,
      energy: point.energy,
      relative: point.energy - lowestEnergy,
      label: point.label,
      coordinates: point.coordinates,
    };
  const isDiene = bond.dieneTorsion !== null;
  const sCis = isDiene ? lowestOf(minima.filter((point) => isSCis(point.angle))) : null;
  const sTrans = isDiene ? lowestOf(minima.filter((point) => !isSCis(point.angle))) : null;
  const top = barrierPoint(scan.stationary, sCis, sTrans);
  const planar = scan.points.find(({ angle }) => Math.abs(angle) < 1e-9);
  const lowest = lowestOf(minima);
  return {
    bond: [bond.j, bond.k],
    kind: bond.kind,
    inRing: false,
    torsion: scan.torsion,
    twist: lowest && twistOf(molecule, bond, lowest.coordinates),
    sCis: form(sCis),
    sTrans: form(sTrans),
    difference: sCis && sTrans && sCis.energy - sTrans.energy,
    sCisFraction: isDiene ? basinPopulations(energyCurve, [-90, 90], temperature)[0] : null,
    planarSCisCost: isDiene && planar ? planar.energy - lowestEnergy : null,
    barrier: top && top.energy - lowestEnergy,
    meanOverlap: profileAverage(energyCurve, (angle) => overlapCurve.at(angle), temperature),
    profile: samples,
    complete: scan.complete,
  };
}

function isSCis(angle: number): boolean {
  return Math.abs(angle) < 90;
}

/** The lowest point; of mirror images the one with the larger angle, so that the choice is always the same. */
function lowestOf(points: readonly StationaryPoint[]): StationaryPoint | null {
  return points.reduce<StationaryPoint | null>((best, point) => {
    if (!best || point.energy < best.energy - SAME_ENERGY) return point;
    return point.energy <= best.energy + SAME_ENERGY && point.angle > best.angle ? point : best;
  }, null);
}

/** The highest maximum on the easier way between two minima; without two, the highest of all. */
function barrierPoint(
  stationary: readonly StationaryPoint[],
  from: StationaryPoint | null,
  to: StationaryPoint | null,
): StationaryPoint | null {
  const maxima = stationary.filter(({ kind }) => kind === 'maximum');
  if (!from || !to) return highestOf(maxima);
  const upward = (angle: number): number => (turnBetween(from.angle, angle) + 360) % 360;
  const span = upward(to.angle);
  const oneWay = highestOf(maxima.filter(({ angle }) => upward(angle) < span));
  const otherWay = highestOf(maxima.filter(({ angle }) => upward(angle) > span));
  if (!oneWay || !otherWay) return null;
  return oneWay.energy <= otherWay.energy ? oneWay : otherWay;
}

function highestOf(points: readonly StationaryPoint[]): StationaryPoint | null {
  return points.reduce<StationaryPoint | null>(
    (best, point) => (!best || point.energy > best.energy ? point : best),
    null,
  );
}
