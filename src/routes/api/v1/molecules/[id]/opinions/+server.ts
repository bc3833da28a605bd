import { operations } from '$lib/domain/api';
import { serve } from '$lib/server/api';
import { refuseAsProblem } from '$lib/server/program-tasks';
import * as opinions from '$lib/server/opinions';

export const POST = serve(operations.askOpinion, ({ member, id, body }) =>
  opinions.request(member, id('id'), body).catch(refuseAsProblem),
);
