/** What operators do to the machines, and the words for it. */
import { z } from 'zod';

/** What an operator may want of a worker. */
export const workerOrders = ['take', 'pause', 'drain'] as const;

export const orderWorkerSchema = z.object({
  worker: z.string().min(1).max(300),
  order: z.enum(workerOrders, 'Choose what the worker shall do.'),
});

/** Why a task failed through the machine or the program, so that it may go well another time. */
export const machineFaults = ['worker-lost', 'internal-error', 'time-limit'] as const;
export type MachineFault = (typeof machineFaults)[number];

/** True where a task that failed for this reason is worth another try. */
export const isMachineFault = (code: string): code is MachineFault =>
  machineFaults.some((each) => each === code);

export const requeueReasonSchema = z.object({ reason: z.enum(machineFaults) });
export const requeueTaskSchema = z.object({ task: z.uuid() });
