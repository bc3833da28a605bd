/** The price of a plan while its form is filled in. */
import { error, json } from '@sveltejs/kit';
import { uuidParam } from '$lib/domain/identifiers';
import { readPlan } from '$lib/domain/plan-form';
import { estimate } from '$lib/server/estimates';
import { whoAsks } from '$lib/server/teams';
import type { RequestHandler } from './$types';

export const POST: RequestHandler = async ({ locals, params, request }) => {
  const plan = readPlan(await request.formData());
  if (!plan.success) error(400, plan.error.issues[0].message);
  return json(await estimate(whoAsks(locals), uuidParam(params.id), plan.data));
};
