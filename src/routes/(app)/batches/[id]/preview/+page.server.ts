import { error, fail, redirect } from '@sveltejs/kit';
import { uuidParam } from '$lib/domain/identifiers';
import { readPlan } from '$lib/domain/plan-form';
import { bondChoiceSchema } from '$lib/domain/submission';
import * as batches from '$lib/server/batches';
import { chooseBonds, discardDraft } from '$lib/server/drafts';
import { roomOf } from '$lib/server/limits';
import { SubmissionError } from '$lib/server/refusals';
import { submit } from '$lib/server/submission';
import { whoAsks } from '$lib/server/teams';
import type { Actions, PageServerLoad } from './$types';

const PAGE_SIZE = 25;

export const load: PageServerLoad = async ({ locals, params, url }) => {
  const page = Math.max(1, Math.floor(Number(url.searchParams.get('page'))) || 1);
  const id = uuidParam(params.id);
  const member = whoAsks(locals);
  const listed = await batches.listRows(member, id, page, PAGE_SIZE);
  if (listed.batch.submittedAt) redirect(303, `/batches/${id}`);
  return { ...listed, page, pageSize: PAGE_SIZE, room: await roomOf(member) };
};

export const actions: Actions = {
  submit: async ({ locals, params, request }) => {
    const member = whoAsks(locals);
    const id = uuidParam(params.id);
    const plan = readPlan(await request.formData());
    if (!plan.success) return fail(400, { fault: plan.error.issues[0].message });
    try {
      await submit(member, id, plan.data);
    } catch (cause) {
      if (!(cause instanceof SubmissionError)) throw cause;
      return fail(400, { fault: cause.message });
    }
    redirect(303, `/batches/${id}`);
  },

  choose: async ({ locals, params, request }) => {
    const form = await request.formData();
    const choice = bondChoiceSchema.safeParse({
      purpose: form.get('purpose'),
      bonds: parseJson(form.get('bonds')),
    });
    if (!choice.success) error(400, 'These are no bonds.');
    await chooseBonds(
      whoAsks(locals),
      uuidParam(params.id),
      uuidParam(String(form.get('row'))),
      choice.data,
    );
  },

  discard: async ({ locals, params }) => {
    await discardDraft(whoAsks(locals), uuidParam(params.id));
    redirect(303, '/batches/new');
  },
};

function parseJson(value: FormDataEntryValue | null): unknown {
  try {
    return JSON.parse(String(value));
  } catch {
    return null;
  }
}
