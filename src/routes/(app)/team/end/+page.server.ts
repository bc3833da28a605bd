import { fail } from '@sveltejs/kit';
import { teamEndSchema } from '$lib/domain/team-forms';
import { readForm } from '$lib/server/forms';
import { requireFresh } from '$lib/server/freshness';
import { require } from '$lib/server/member';
import { askDeletion, DELETION_DAYS, undoDeletion } from '$lib/server/team-deletion';
import { whoAsks } from '$lib/server/teams';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = ({ locals }) => {
  require(whoAsks(locals), 'delete the team');
  return { days: DELETION_DAYS };
};

export const actions: Actions = {
  ask: async (event) => {
    const member = whoAsks(event.locals);
    require(member, 'delete the team');
    requireFresh(event);
    const form = await readForm(event.request, teamEndSchema);
    if (!form.data) return fail(400, { fault: form.faults.errors['name'] ?? '' });
    const outcome = await askDeletion(member, form.data.name);
    if (outcome === 'wrong name') {
      return fail(400, { fault: `Type the name of the team as it is: ${member.teamName}` });
    }
    if (outcome === 'asked already')
      return fail(409, { fault: 'The deletion is asked for already.' });
  },

  undo: async ({ locals }) => {
    if (!(await undoDeletion(whoAsks(locals)))) {
      return fail(409, { fault: 'No deletion is asked for any more.' });
    }
  },
};
