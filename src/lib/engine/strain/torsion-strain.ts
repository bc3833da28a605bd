/** What the torsion angles of a geometry cost, each by the profile of its own surroundings. */
import type { Control } from '../control';
import { createForceField } from '../forcefield/create';
import type { ForceField } from '../forcefield/forcefield';
import { torsion } from '../geometry';
import { rotatableBonds } from '../molecule/rotatable';
import { profileCurve } from '../torsion/profile';
import { scanTorsion } from '../torsion/scan';
import { defaultScanOptions } from '../torsion/scan-result';
import type { TorsionAtoms } from '../torsion/scan-symmetry';
import { turnBetween } from '../units';
import { cutFragment } from './fragment';
import type { TorsionStrain } from './strain';

/** Energies of minima that symmetry makes equal differ by rounding only, kcal/mol. */
const SAME_ENERGY = 1e-3;

/**
 * The strain of every rotatable bond of a geometry (Å, 3N), most strained first; those that time did not suffice for are
 * missing, and `complete` is false.
 */
export async function torsionStrains(
  forceField: ForceField,
  x: Float64Array,
  seed: number,
  control: Control,
): Promise<{ strains: TorsionStrain[]; complete: boolean }> {
  const bonds = rotatableBonds(forceField.molecule);
  const strains: TorsionStrain[] = [];
  for (const [n, { torsion: atoms }] of bonds.entries()) {
    if (control.expired()) break;
    const part = control.part(n / bonds.length, (n + 1) / bonds.length);
    strains.push(await torsionStrain(forceField, x, atoms, seed, part));
  }
  strains.sort((a, b) => b.strain - a.strain);
  const complete = strains.length === bonds.length && strains.every((bond) => bond.complete);
  return { strains, complete };
}

async function torsionStrain(
  { molecule, settings }: ForceField,
  x: Float64Array,
  atoms: TorsionAtoms,
  seed: number,
  control: Control,
): Promise<TorsionStrain> {
  const [i, j, k, l] = atoms;
  const fragment = cutFragment(molecule, x, j, k);
  const own = [i, j, k, l].map((atom) => fragment.indices[atom]);
  const scan = await scanTorsion(
    createForceField(fragment.molecule, settings),
    { ...defaultScanOptions, torsion: [own[0], own[1], own[2], own[3]], seed },
    control,
  );
  const samples = [...scan.points, ...scan.stationary];
  const lowest = samples.reduce((best, sample) => (sample.energy < best.energy ? sample : best));
  const angle = torsion(x, i, j, k, l);
  // A symmetric profile is lowest at several angles.
  const preferred = samples
    .filter(({ energy }) => energy < lowest.energy + SAME_ENERGY)
    .reduce((best, sample) =>
      Math.abs(turnBetween(angle, sample.angle)) < Math.abs(turnBetween(angle, best.angle))
        ? sample
        : best,
    );
  return {
    bond: [j, k],
    torsion: atoms,
    angle,
    // The curve meets its points up to rounding only.
    strain: Math.max(0, profileCurve(scan).at(angle) - lowest.energy),
    preferredAngle: preferred.angle,
    profile: samples
      .map((sample) => ({ angle: sample.angle, relative: sample.energy - lowest.energy }))
      .sort((a, b) => a.angle - b.angle),
    complete: scan.complete,
  };
}
