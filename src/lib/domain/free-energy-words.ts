/** Why a form has no free energy, in words. */
import type { FreeEnergyFlaw, VibrationalAnalysis } from '../engine/light';
import { FREE_ENERGY_WINDOW } from '../engine/light';

const REASONS: Readonly<Record<FreeEnergyFlaw, string>> = {
  'left-out': `left out, since it lies more than ${FREE_ENERGY_WINDOW} kcal/mol above the lowest`,
  'no-time': 'the time ran out before its vibrations were computed',
  'not-a-minimum': 'an imaginary frequency says that it is no minimum',
  'not-a-saddle': 'the point reached from it does not have one imaginary frequency',
  'not-refined': 'no saddle was reached from this top of the profile',
  'not-the-torsion': 'the saddle near it does not lead to the forms on its two sides',
};

/** The reason, to stand after "none: "; null where there is a free energy, or where none was asked for. */
export function whyNoFreeEnergy(analysis: VibrationalAnalysis | null | undefined): string | null {
  return analysis?.flaw ? REASONS[analysis.flaw] : null;
}
