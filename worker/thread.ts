/** A compute thread: it only calls the engine. Progress and cancelling travel over the port that comes with a request. */
import { setImmediate as breathe } from 'node:timers/promises';
import type { MessagePort } from 'node:worker_threads';
import { perform, readMolecule, type Request, type Result } from '../src/lib/engine';
import { InputError } from '../src/lib/engine/errors';
import { registerChemistryResources } from '../src/lib/server/chemistry-resources';

registerChemistryResources();
// The first molecule that is read takes a second, in which no cancel would be heard: it is read before any task comes.
readMolecule({ smiles: 'C' });

export interface ComputeOrder {
  readonly request: Request;
  /** How long searches may take before they end with what they have, milliseconds. */
  readonly budget: number;
  readonly port: MessagePort;
}

/** What a thread answers: the result, what is wrong with the molecule or its settings, or how our own code failed. */
export type ComputeAnswer =
  | { readonly result: Result }
  | { readonly refused: { code: string; message: string; atom?: number; line?: number } }
  | { readonly broken: string };

/** Computes one request; rejects only when it was cancelled. */
export default async function compute({
  request,
  budget,
  port,
}: ComputeOrder): Promise<ComputeAnswer> {
  const controller = new AbortController();
  port.on('message', () => controller.abort());
  try {
    const result = await perform(request, {
      report: (fraction, stage) => port.postMessage({ fraction, stage }),
      signal: controller.signal,
      now: () => performance.now(),
      breathe: () => breathe(),
      budget,
    });
    return { result };
  } catch (error) {
    if (controller.signal.aborted) throw error;
    if (!(error instanceof InputError)) return { broken: String((error as Error)?.stack ?? error) };
    const { code, message, atom, line } = error;
    return {
      refused: {
        code,
        message,
        ...(atom === undefined ? {} : { atom }),
        ...(line === undefined ? {} : { line }),
      },
    };
  } finally {
    port.close();
  }
}
