/** What a team's own programs are told of finished batches, how it is signed, and what leads write to set it up. */
import { z } from 'zod';

/** Most webhooks of a team. */
export const WEBHOOK_LIMIT = 5;
/** How long deliveries stay in the log, days. */
export const DELIVERY_DAYS = 30;
/** How long the secret of before signs beside a new one, hours. */
export const OVERLAP_HOURS = 24;
/** After so many days of nothing but failures a webhook is switched off. */
export const GIVE_UP_DAYS = 7;
/** Waits before the second attempt and those after it, seconds: eight attempts in about a day. */
export const RETRY_WAITS = [30, 120, 600, 1_800, 7_200, 21_600, 54_000] as const;
/** Receivers should refuse what was signed longer ago than this, minutes. */
export const REPLAY_MINUTES = 5;

export const webhookEvents = ['batch.finished', 'webhook.test'] as const;
export type WebhookEvent = (typeof webhookEvents)[number];

/** Headers of every delivery. */
export const webhookHeaders = {
  event: 'Windlass-Event',
  delivery: 'Windlass-Delivery',
  timestamp: 'Windlass-Timestamp',
  signature: 'Windlass-Signature',
} as const;

const id = z.uuid();
const moment = z.iso.datetime().describe('UTC');
const envelope = z.object({
  delivery: id.describe('As in the header Windlass-Delivery; the same when it is sent again'),
  at: moment.describe('When it happened, UTC'),
  team: z.object({ id, name: z.string() }),
});

export const batchFinishedSchema = envelope.extend({
  event: z.literal('batch.finished'),
  batch: z.object({
    id,
    name: z.string(),
    submittedAt: moment,
    counts: z
      .object({
        done: z.number().int(),
        failed: z.number().int(),
        cancelled: z.number().int(),
      })
      .describe('Tasks by how they ended'),
    page: z.url().describe('Its page, for people'),
    bundle: z.url().describe('Its bundle in the REST interface, for programs with a token'),
  }),
});
export type BatchFinished = z.output<typeof batchFinishedSchema>;

export const webhookTestSchema = envelope.extend({ event: z.literal('webhook.test') });
export type WebhookTest = z.output<typeof webhookTestSchema>;

const urlSchema = z
  .string()
  .trim()
  .max(500, 'Use at most 500 characters.')
  .refine((text) => URL.canParse(text) && /^https?:\/\//i.test(text), {
    message: 'Write a whole address, like https://example.com/finished.',
    abort: true,
  })
  .refine((text) => {
    const { username, password } = new URL(text);
    return username === '' && password === '';
  }, 'Leave user name and password out of the address; the signature says who sends.')
  .transform((text) => new URL(text).href);

export const newWebhookSchema = z.strictObject({
  name: z
    .string()
    .trim()
    .min(1, 'Give it a name, so that you know it again.')
    .max(80, 'Use at most 80 characters.'),
  url: urlSchema,
});
export type NewWebhook = z.output<typeof newWebhookSchema>;

export const webhookSchema = z.object({ webhook: z.uuid() });
export const switchWebhookSchema = webhookSchema.extend({ on: z.enum(['yes', 'no']) });
export const deliverySchema = z.object({ delivery: z.uuid() });

/** A webhook as the REST interface shows it. */
export const webhookAnswerSchema = z.object({
  id,
  name: z.string(),
  url: z.string(),
  on: z.boolean(),
  failingSince: moment.nullable().describe('Since when every attempt failed'),
  givenUpAt: moment.nullable().describe('When it was switched off because nothing got through'),
  createdAt: moment,
});

/** A line of the log as the REST interface shows it. */
export const deliveryAnswerSchema = z.object({
  id,
  event: z.enum(webhookEvents),
  state: z.enum(['waiting', 'delivered', 'failed']),
  createdAt: moment,
  attempts: z.number().int(),
  attemptedAt: moment.nullable(),
  status: z.number().int().nullable().describe('HTTP status of the last answer'),
  reason: z.string().describe('Why the last attempt failed; empty where it did not'),
  milliseconds: z.number().int().nullable(),
  nextAt: moment.nullable(),
});
