/** From the fields of the plan's form to a plan, the same in the browser and on the server. */
import { planSchema } from './submission';

/** Reads a plan from its form; the answer is that of the schema, with messages for people. */
export function readPlan(form: FormData) {
  const checked = (name: string): boolean => form.get(name) === 'on';
  const number = (name: string): number => Number(form.get(name));
  const temperature = number('temperature');
  return planSchema.safeParse({
    conformers: checked('conformers')
      ? { effort: form.get('effort'), window: number('window'), temperature }
      : null,
    scans: checked('scans')
      ? {
          bonds: form.get('bonds'),
          terminal: checked('terminal'),
          relaxed: form.get('relaxation') !== 'rigid',
          step: number('step'),
          temperature,
        }
      : null,
    maps: checked('maps') ? { step: number('mapStep') } : null,
    conjugation: checked('conjugation') ? { temperature } : null,
    strain: checked('strain') ? { tether: number('tether') } : null,
  });
}
