/** Where energy models disagree about a turn: the barrier, or which form is preferred. */
import { turnBetween } from '../engine/light';
import type { Form, ProfileReading } from './profile-reading';

/** A profile as one model sees it. */
export interface ModelReading {
  readonly model: string;
  readonly reading: Pick<ProfileReading, 'forms' | 'turn'>;
}

/** A barrier that the models see differently: the lowest and the highest value, kcal/mol. */
export interface BarrierDisagreement {
  readonly about: 'barrier';
  readonly low: { readonly model: string; readonly barrier: number };
  readonly high: { readonly model: string; readonly barrier: number };
}

/** Two models that prefer different forms. */
export interface FormDisagreement {
  readonly about: 'form';
  readonly first: { readonly model: string; readonly form: Form };
  readonly second: { readonly model: string; readonly form: Form };
  /** How far the energy difference of the two forms differs between the models, kcal/mol. */
  readonly difference: number;
}
export type Disagreement = BarrierDisagreement | FormDisagreement;

/** Models that differ by more than this disagree, kcal/mol. */
export const DISAGREEMENT = 1;
/** Minima of two models this near to each other are one form, degrees. */
const SAME_FORM = 45;

/** Everything the models disagree about by more than 1 kcal/mol; the preferred form first, since it matters most. */
export function disagreementsOf(models: readonly ModelReading[]): Disagreement[] {
  return [...formDisagreements(models), ...barrierDisagreements(models)];
}

function barrierDisagreements(models: readonly ModelReading[]): BarrierDisagreement[] {
  const known = models
    .flatMap(({ model, reading }) =>
      reading.turn ? [{ model, barrier: reading.turn.barrier }] : [],
    )
    .toSorted((a, b) => a.barrier - b.barrier);
  const [low, high] = [known.at(0), known.at(-1)];
  if (!low || !high || high.barrier - low.barrier <= DISAGREEMENT) return [];
  return [{ about: 'barrier', low, high }];
}

/** Against the first model, which the others are asked about. */
function formDisagreements([first, ...others]: readonly ModelReading[]): FormDisagreement[] {
  const preferred = first?.reading.forms.at(0);
  if (!preferred) return [];
  return others.flatMap(({ model, reading }): FormDisagreement[] => {
    const form = reading.forms.at(0);
    if (!form || isSameForm(preferred, form)) return [];
    const costOf = (forms: readonly Form[], other: Form) =>
      forms.find((each) => isSameForm(each, other))?.relative ?? Infinity;
    const difference = costOf(first.reading.forms, form) + costOf(reading.forms, preferred);
    if (difference <= DISAGREEMENT) return [];
    return [
      {
        about: 'form',
        first: { model: first.model, form: preferred },
        second: { model, form },
        difference,
      },
    ];
  });
}

function isSameForm(a: Form, b: Form): boolean {
  return a.angles.some((one) =>
    b.angles.some((other) => Math.abs(turnBetween(one, other)) <= SAME_FORM),
  );
}
