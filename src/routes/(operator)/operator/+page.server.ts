import { fail } from '@sveltejs/kit';
import {
  orderWorkerSchema,
  requeueReasonSchema,
  requeueTaskSchema,
  type workerOrders,
} from '$lib/domain/operation';
import { readForm } from '$lib/server/forms';
import { report as letterReport } from '$lib/server/letter-delivery';
import * as operation from '$lib/server/operation';
import { databaseMegabytes, storageByTeam } from '$lib/server/operation-storage';
import * as operatorActions from '$lib/server/operator-actions';
import { readOperations, whoOperates } from '$lib/server/operators';
import { listWorkers } from '$lib/server/workers';
import type { Actions, PageServerLoad } from './$types';

const SHOWN_OPERATIONS = 20;
const SHOWN_LETTERS = 20;

export const load: PageServerLoad = async (event) => {
  event.depends('windlass:operation');
  whoOperates(event);
  const [queue, oldestSeconds, workers, running, failures, machineFailures, machineCounts] =
    await Promise.all([
      operation.queueDepth(),
      operation.oldestWaitingSeconds(),
      listWorkers(),
      operation.runningTasks(),
      operation.failuresByReason(),
      operation.machineFailures(),
      operation.machineFailureCounts(),
    ]);
  const [webhooks, letters, operations, storage, megabytes] = await Promise.all([
    operation.failingWebhooks(),
    letterReport(SHOWN_LETTERS),
    readOperations(SHOWN_OPERATIONS),
    storageByTeam(),
    databaseMegabytes(),
  ]);
  return {
    at: new Date(),
    queue,
    oldestSeconds,
    workers,
    running,
    failures,
    machineFailures,
    machineCounts,
    webhooks,
    letters,
    operations,
    storage,
    megabytes,
  };
};

const said: Record<(typeof workerOrders)[number], string> = {
  take: 'The worker takes tasks again.',
  pause: 'The worker takes no more tasks; what it is on goes on.',
  drain: 'The worker ends once what it is on is done.',
};
const requeued = (tasks: number) =>
  tasks === 0
    ? 'Nothing was left to queue again.'
    : `${tasks} ${tasks === 1 ? 'task is' : 'tasks are'} queued again.`;

export const actions: Actions = {
  order: async (event) => {
    const operator = whoOperates(event);
    const form = await readForm(event.request, orderWorkerSchema);
    if (!form.data) return fail(400, { message: 'Name the worker and what it shall do.' });
    const { worker, order } = form.data;
    const isThere = await operatorActions.orderWorker(operator, worker, order);
    return isThere ? { message: said[order] } : fail(409, { message: 'This worker is gone.' });
  },

  requeueReason: async (event) => {
    const operator = whoOperates(event);
    const form = await readForm(event.request, requeueReasonSchema);
    if (!form.data)
      return fail(400, { message: 'Only faults of machine or program can be mended so.' });
    return { message: requeued(await operatorActions.requeueReason(operator, form.data.reason)) };
  },

  requeueTask: async (event) => {
    const operator = whoOperates(event);
    const form = await readForm(event.request, requeueTaskSchema);
    if (!form.data) return fail(400, { message: 'Name the task.' });
    return { message: requeued(await operatorActions.requeueTask(operator, form.data.task)) };
  },
};
