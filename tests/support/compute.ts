/** One request through the engine's front door, as the command line and the worker ask it. */
import { setImmediate } from 'node:timers/promises';
import type { ComputeRequestInput } from '$lib/domain/compute';
import { computeRequestSchema } from '$lib/domain/compute';
import type { ControlOptions } from '$lib/engine/control';
import { perform } from '$lib/engine/run';
import type { Request } from '$lib/engine/tasks/request';
import type { Result } from '$lib/engine/tasks/result';

type TaskInput = ComputeRequestInput['task'];
type TaskKind = TaskInput['kind'];
type Settings<Kind extends TaskKind> = Omit<Extract<TaskInput, { kind: Kind }>, 'kind'>;
export type MoleculeInput = ComputeRequestInput['molecule'];

const clock: ControlOptions = {
  now: () => performance.now(),
  breathe: async () => {
    await setImmediate();
  },
};

/** Parses a request, which fills its defaults in, and performs it. */
export function compute<Kind extends TaskKind>(
  molecule: MoleculeInput,
  kind: Kind,
  settings: Settings<Kind> = {} as Settings<Kind>,
  options: Partial<ControlOptions> = {},
): Promise<Result<Kind>> {
  const request = computeRequestSchema.parse({ molecule, task: { ...settings, kind } });
  return perform(request as Request<Kind>, { ...clock, ...options });
}
