import { fail } from '@sveltejs/kit';
import { limitsFormSchema } from '$lib/domain/limits';
import { memberSchema } from '$lib/domain/team-forms';
import { nothing, readForm } from '$lib/server/forms';
import { loadLimits, setMemberLimits, setTeamLimits } from '$lib/server/limit-settings';
import { ceilings, limitsOf } from '$lib/server/limits';
import { whoAsks } from '$lib/server/teams';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = ({ locals }) => loadLimits(whoAsks(locals));

/** What a form here answers: whose limits it was about, and what was wrong with which. */
const answer = (whose: string, errors = nothing, values = nothing) => ({ whose, errors, values });

export const actions: Actions = {
  team: async ({ request, locals }) => {
    const member = whoAsks(locals);
    const form = await readForm(request, limitsFormSchema(ceilings));
    if (!form.data) return fail(400, answer('team', form.faults.errors, form.faults.values));
    await setTeamLimits(member, form.data);
    return answer('team');
  },

  member: async ({ request, locals }) => {
    const member = whoAsks(locals);
    const { team } = await limitsOf(member);
    const form = await readForm(request, limitsFormSchema(team).extend(memberSchema.shape));
    if (!form.data) {
      const { errors, values } = form.faults;
      return fail(400, answer(values['member'] ?? '', errors, values));
    }
    const { member: userId, ...limits } = form.data;
    await setMemberLimits(member, userId, limits);
    return answer(userId);
  },
};
