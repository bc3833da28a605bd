/** The vibrations of minima. */
import type { Control } from '../control';
import type { ForceField } from '../forcefield/forcefield';
import { imaginaryModes } from './free-energy';
import { FREE_ENERGY_WINDOW } from './shape-free-energies';
import type { VibrationalAnalysis } from './shape-free-energies';
import { vibrationalForm, vibrationsOf } from './vibrations';

/** What stands in the place of numbers that time did not suffice for. */
export const noTime: VibrationalAnalysis = { modes: null, flaw: 'no-time' };
const leftOut: VibrationalAnalysis = { modes: null, flaw: 'left-out' };

/** The vibrations at a minimum (Å, 3N); a flaw where an imaginary frequency says that it is none. */
export async function minimumVibrations(
  forceField: ForceField,
  x: Readonly<Float64Array>,
  control: Control,
): Promise<VibrationalAnalysis> {
  const modes = vibrationsOf(await vibrationalForm(forceField, x, control));
  return { modes, flaw: imaginaryModes(modes) === 0 ? null : 'not-a-minimum' };
}

/** The vibrations of conformers, lowest first, as far as `FREE_ENERGY_WINDOW` and the time go. */
export async function conformerVibrations(
  forceField: ForceField,
  conformers: readonly { readonly coordinates: Float64Array; readonly relative: number }[],
  control: Control,
): Promise<VibrationalAnalysis[]> {
  const analyses: VibrationalAnalysis[] = [];
  for (const [n, { coordinates, relative }] of conformers.entries()) {
    control.report(n / conformers.length, 'vibrations');
    if (relative > FREE_ENERGY_WINDOW) analyses.push(leftOut);
    else if (control.expired()) analyses.push(noTime);
    else analyses.push(await minimumVibrations(forceField, coordinates, control));
  }
  return analyses;
}
