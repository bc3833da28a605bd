/** What programs may ask of the REST interface, and what it answers. Pages, routes and the OpenAPI document read this. */
import { z } from 'zod';
import { answerSchema } from './bundle-schema';
import { moleculeSchema } from './compute';
import { opinionSettingsSchema } from './second-opinions';
import { planSchema, readingSchema, remarkSchema, ROW_LIMIT } from './submission';
import {
  DELIVERY_DAYS,
  deliveryAnswerSchema,
  newWebhookSchema,
  WEBHOOK_LIMIT,
  webhookAnswerSchema,
} from './webhooks';

/** What a token may do; its person's role in the team still counts. */
export const apiScopes = ['read', 'submit', 'webhooks'] as const;
export type ApiScope = (typeof apiScopes)[number];

/** The scopes of a token that is made for one thing: whatever it does, it may read. */
export const scopesFor = (scope: ApiScope): readonly ApiScope[] =>
  scope === 'read' ? ['read'] : ['read', scope];

/** How long a token may be good for, days. */
export const tokenDays = [7, 30, 90, 365] as const;

export const newTokenSchema = z.object({
  name: z
    .string()
    .trim()
    .min(1, 'Give the token a name, so that you know it again.')
    .max(80, 'Use at most 80 characters.'),
  /** What it may do beside reading. */
  scope: z.enum(apiScopes, 'Choose what the token may do.'),
  days: z.coerce
    .number()
    .refine((days) => tokenDays.some((each) => each === days), 'Choose how long it is good.'),
});

export const revokeTokenSchema = z.object({ token: z.uuid() });

const PAGE_LIMIT = 200;

export const pageQuerySchema = z.object({
  limit: z.coerce.number().int().min(1).max(PAGE_LIMIT).default(50),
  cursor: z.string().max(200).optional().describe('`next` of the page before'),
});

const id = z.uuid();
const moment = z.iso.datetime().describe('UTC');
const countsSchema = z
  .object({
    queued: z.number().int(),
    running: z.number().int(),
    done: z.number().int(),
    failed: z.number().int(),
    cancelled: z.number().int(),
  })
  .describe('Tasks by state');

const batchSummary = z.object({
  id,
  name: z.string(),
  submittedAt: moment,
  maker: z.string().nullable().describe('Null for a former member'),
  counts: countsSchema,
});

const page = <Item extends z.ZodType>(item: Item) =>
  z.object({
    items: z.array(item),
    next: z.string().nullable().describe('Cursor of the next page; null on the last'),
  });

const entry = z.object({
  id,
  position: z.number().int().describe('From 1'),
  name: z.string(),
  verdict: z.enum(['ready', 'warning', 'error']),
  remarks: z.array(remarkSchema),
  moleculeId: id.nullable().describe('Null for a row that could not be read'),
  counts: countsSchema,
});

export const newBatchSchema = z.strictObject({
  name: z.string().trim().min(1).max(120),
  molecules: z
    .array(z.strictObject({ name: z.string().max(200).default(''), molecule: moleculeSchema }))
    .min(1)
    .max(ROW_LIMIT),
  reading: readingSchema.prefault({}),
  plan: planSchema,
});

const changed = z.object({ tasks: z.number().int().describe('How many were changed') });

/** One thing that can be asked, as routes carry it out and the document describes it. */
export interface Operation {
  readonly method: 'get' | 'post' | 'delete';
  /** Below /api/v1; names in braces are parameters. */
  readonly path: string;
  readonly summary: string;
  readonly scope: ApiScope;
  readonly query?: z.ZodObject;
  readonly body?: z.ZodType;
  /** True where a repeated request can be recognized by an Idempotency-Key. */
  readonly takesKey?: true;
  /** Absent where the answer is a zip, or after a deletion nothing. */
  readonly answer?: z.ZodType;
}

export const operations = {
  me: {
    method: 'get',
    path: '/me',
    summary: 'Who the token speaks for, in which team and role',
    scope: 'read',
    answer: z.object({
      userId: id,
      team: z.object({ id, name: z.string(), role: z.string() }),
      scopes: z.array(z.enum(apiScopes)),
    }),
  },
  listBatches: {
    method: 'get',
    path: '/batches',
    summary: 'Batches of the team, the newest first',
    scope: 'read',
    query: pageQuerySchema,
    answer: page(batchSummary),
  },
  submitBatch: {
    method: 'post',
    path: '/batches',
    summary:
      'Submits molecules. Rows that cannot be read are kept with the reason and hinder no other. With an Idempotency-Key a repeated request is answered as the first one and not carried out again',
    scope: 'submit',
    takesKey: true,
    body: newBatchSchema,
    answer: z.object({
      id,
      queued: z.number().int().describe('Tasks to be computed'),
      reused: z.number().int().describe('Tasks whose answer was there already'),
      rows: z.number().int(),
      errors: z.number().int().describe('Rows that could not be read'),
    }),
  },
  getBatch: {
    method: 'get',
    path: '/batches/{id}',
    summary: 'A batch and how far it is',
    scope: 'read',
    answer: batchSummary.extend({
      share: z.number().describe('Of the work that is done, 0 to 1'),
      plan: z.unknown(),
      reading: z.unknown(),
    }),
  },
  listRows: {
    method: 'get',
    path: '/batches/{id}/rows',
    summary: 'The rows of a batch in their order',
    scope: 'read',
    query: pageQuerySchema,
    answer: page(entry),
  },
  cancelBatch: {
    method: 'post',
    path: '/batches/{id}/cancel',
    summary: 'Cancels what is queued or running',
    scope: 'submit',
    answer: changed,
  },
  rerunBatch: {
    method: 'post',
    path: '/batches/{id}/rerun',
    summary: 'Queues what failed or was cancelled again',
    scope: 'submit',
    answer: changed,
  },
  batchBundle: {
    method: 'get',
    path: '/batches/{id}/bundle',
    summary: 'The bundle of a batch, a zip',
    scope: 'read',
  },
  getMolecule: {
    method: 'get',
    path: '/molecules/{id}',
    summary: 'A molecule and the results there are of it',
    scope: 'read',
    answer: z.object({
      id,
      smiles: z.string(),
      formula: z.string(),
      atoms: z.number().int(),
      results: z.array(
        z.object({ id, kind: z.string(), model: z.string(), engineVersion: z.string() }),
      ),
    }),
  },
  getResult: {
    method: 'get',
    path: '/molecules/{id}/results/{result}',
    summary: 'One result with all its numbers and geometries, as the JSON of a bundle',
    scope: 'read',
    answer: answerSchema,
  },
  askOpinion: {
    method: 'post',
    path: '/molecules/{id}/opinions',
    summary:
      'Asks for a second opinion on a relaxed MMFF94s scan by xtb: quick for energies on its geometries, relaxed for a scan by GFN2-xTB with GFN1-xTB on top. The same request is not carried out twice',
    scope: 'submit',
    body: opinionSettingsSchema,
    answer: z.object({
      taskId: id,
      state: z.enum(['queued', 'running', 'done']),
    }),
  },
  moleculeBundle: {
    method: 'get',
    path: '/molecules/{id}/bundle',
    summary: 'The bundle of a molecule, a zip',
    scope: 'read',
  },
  listWebhooks: {
    method: 'get',
    path: '/webhooks',
    summary: 'Webhooks of the team; for leads, as all about webhooks',
    scope: 'webhooks',
    answer: z.object({ items: z.array(webhookAnswerSchema) }),
  },
  createWebhook: {
    method: 'post',
    path: '/webhooks',
    summary: `Adds a webhook, of which a team has at most ${WEBHOOK_LIMIT}. The answer tells its secret, which is told only once`,
    scope: 'webhooks',
    body: newWebhookSchema,
    answer: z.object({ id, name: z.string(), secret: z.string() }),
  },
  deleteWebhook: {
    method: 'delete',
    path: '/webhooks/{id}',
    summary: 'Removes a webhook with its log',
    scope: 'webhooks',
  },
  testWebhook: {
    method: 'post',
    path: '/webhooks/{id}/test',
    summary: 'Sends a test, also to a webhook that is off',
    scope: 'webhooks',
    answer: z.object({ delivery: id }),
  },
  listDeliveries: {
    method: 'get',
    path: '/webhooks/{id}/deliveries',
    summary: `What was sent to a webhook in the last ${DELIVERY_DAYS} days, the newest first`,
    scope: 'webhooks',
    query: pageQuerySchema,
    answer: page(deliveryAnswerSchema),
  },
} as const satisfies Record<string, Operation>;
export type OperationName = keyof typeof operations;

/** An error as RFC 9457 describes it. */
export const problemSchema = z.object({
  type: z.literal('about:blank'),
  title: z.string(),
  status: z.number().int(),
  detail: z.string(),
  errors: z
    .array(z.object({ pointer: z.string(), detail: z.string() }))
    .optional()
    .describe('What is wrong with single fields of the request'),
});
export type Problem = z.output<typeof problemSchema>;
