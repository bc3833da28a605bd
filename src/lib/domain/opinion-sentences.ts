/** Second opinions in a sentence: what the models disagree about comes first, then what they say together. */
import { energyNumber, energyText, type EnergyUnit } from './energy-units';
import type { Disagreement } from './model-comparison';
import type { OpinionReading } from './opinion-reading';
import { anglesText } from './profile-reading';
import { byModel, scanSentence } from './sentences';

/** "MMFF94s, GFN2-xTB and GFN1-xTB" */
export function listed(names: readonly string[]): string {
  return names.length < 2 ? names.join('') : `${names.slice(0, -1).join(', ')} and ${names.at(-1)}`;
}

/** What the models disagree about by more than 1 kcal/mol; empty where they agree. */
export function disagreementSentence(
  bond: string,
  disagreements: readonly Disagreement[],
  unit: EnergyUnit,
): string {
  if (disagreements.length === 0) return '';
  return `The models disagree about ${bond}: ${disagreements.map((each) => disagreementText(each, unit)).join('; ')}.`;
}

function disagreementText(disagreement: Disagreement, unit: EnergyUnit): string {
  if (disagreement.about === 'barrier') {
    const { low, high } = disagreement;
    return `${energyNumber(low.barrier, unit, 1)} to turn by ${low.model}, ${energyText(high.barrier, unit)} by ${high.model}`;
  }
  const { first, second } = disagreement;
  const named = ({ model, form }: typeof first) =>
    `${model} prefers ${form.label} (${anglesText(form.angles)})`;
  return `${named(first)}, ${named(second)}`;
}

/** The whole opinion: disagreement first, then the mean of the models, or a quick look marked as rough. */
export function opinionSentence(bond: string, opinion: OpinionReading, unit: EnergyUnit): string {
  const { disagreements, models, missing, depth } = opinion;
  const quick = depth === 'quick';
  const reading = quick ? models[1]?.reading : opinion.consensusReading;
  const basis = quick
    ? `${models[1]?.model} energies on ${models[0].model} geometries (a quick look, rough)`
    : `the mean of ${listed(models.map(({ model }) => model))}`;
  const agreement =
    disagreements.length > 0
      ? disagreementSentence(bond, disagreements, unit)
      : `The models agree about ${bond} within ${energyText(1, unit)}.`;
  const gaps =
    missing === 0
      ? ''
      : ` ${missing === 1 ? 'One point is' : `${missing} points are`} missing, so forms and barriers may be too.`;
  if (!reading)
    return `${missing > 0 ? '' : agreement}${gaps || ' Too few points are known.'}`.trim();
  const text = scanSentence(
    { bond: byModel(bond, basis), reading, relaxed: true, complete: true, converged: true },
    unit,
  );
  return `${agreement} ${text}${gaps}`;
}
