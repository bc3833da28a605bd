import { fail } from '@sveltejs/kit';
import { z } from 'zod';
import { uuidParam } from '$lib/domain/identifiers';
import {
  heatSettingsSchema,
  opinionSettingsSchema,
  rankingSettingsSchema,
} from '$lib/domain/second-opinions';
import { readForm } from '$lib/server/forms';
import { load as loadMolecule } from '$lib/server/molecule-page';
import { board } from '$lib/server/note-board';
import * as heats from '$lib/server/heats';
import * as opinions from '$lib/server/opinions';
import { ProgramRequestError } from '$lib/server/program-tasks';
import * as rankings from '$lib/server/rankings';
import * as tasks from '$lib/server/tasks';
import { whoAsks } from '$lib/server/teams';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params }) => ({
  molecule: await loadMolecule(whoAsks(locals), uuidParam(params.id)),
  notes: await board(whoAsks(locals), uuidParam(params.id)),
});

/** Says in words why a program’s task was refused; everything else is an error of its own. */
function refused(cause: unknown) {
  if (cause instanceof ProgramRequestError) return fail(409, { programFault: cause.message });
  throw cause;
}

export const actions: Actions = {
  opinion: async ({ locals, params, request }) => {
    const member = whoAsks(locals);
    const form = await readForm(request, opinionSettingsSchema);
    if (!form.data) return fail(400, { programFault: Object.values(form.faults.errors)[0] });
    try {
      await opinions.request(member, uuidParam(params.id), form.data);
    } catch (cause) {
      return refused(cause);
    }
  },

  ranking: async ({ locals, params, request }) => {
    const member = whoAsks(locals);
    const form = await readForm(request, rankingSettingsSchema);
    if (!form.data) return fail(400, { programFault: Object.values(form.faults.errors)[0] });
    try {
      await rankings.request(member, uuidParam(params.id), form.data);
    } catch (cause) {
      return refused(cause);
    }
  },

  heat: async ({ locals, params }) => {
    const member = whoAsks(locals);
    try {
      await heats.request(member, uuidParam(params.id), heatSettingsSchema.parse({}));
    } catch (cause) {
      return refused(cause);
    }
  },

  cancelTask: async ({ locals, request }) => {
    const member = whoAsks(locals);
    const form = await readForm(request, z.object({ batch: z.uuid(), task: z.uuid() }));
    if (!form.data) return fail(400, { programFault: 'Name a task to cancel.' });
    const { batch, task } = form.data;
    if ((await tasks.cancel(member, { batchId: batch, tasks: [task] })) === 0) {
      return fail(409, { programFault: 'It has ended already; there is nothing to cancel.' });
    }
  },
};
