/** A person's choice of the unit in which they read energies. */
import { z } from 'zod';
import { energyUnits } from './energy-units';

/** The unit, and the page it was chosen on. */
export const unitChoiceSchema = z.object({
  unit: z.enum(energyUnits, { error: `Choose one of: ${energyUnits.join(', ')}.` }),
  page: z.string().max(500),
});
