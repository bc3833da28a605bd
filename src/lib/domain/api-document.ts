/** The OpenAPI 3.1 document of the REST interface, made from the schemas that check its requests and answers. */
import { z } from 'zod';
import { operations, problemSchema, type Operation } from './api';
import {
  batchFinishedSchema,
  REPLAY_MINUTES,
  webhookHeaders,
  webhookTestSchema,
  type WebhookEvent,
} from './webhooks';

type Json = Record<string, unknown>;

const json = (schema: z.ZodType, io: 'input' | 'output') => {
  const { $schema: _dialect, ...rest } = z.toJSONSchema(schema, { io, unrepresentable: 'any' });
  return rest;
};

const problem = (description: string): Json => ({
  description,
  content: { 'application/problem+json': { schema: { $ref: '#/components/schemas/Problem' } } },
});

function parametersOf({ path, query, takesKey }: Operation): Json[] {
  const inPath = [...path.matchAll(/\{(\w+)\}/g)].map(([, name]) => ({
    name,
    in: 'path',
    required: true,
    schema: { type: 'string', format: 'uuid' },
  }));
  const shape = query?.shape ?? {};
  const inQuery = Object.entries(shape).map(([name, schema]) => ({
    name,
    in: 'query',
    required: false,
    schema: json(schema as z.ZodType, 'input'),
  }));
  const key = takesKey
    ? [
        {
          name: 'Idempotency-Key',
          in: 'header',
          required: false,
          description: 'Any text of up to 200 characters, kept for a day',
          schema: { type: 'string', maxLength: 200 },
        },
      ]
    : [];
  return [...inPath, ...inQuery, ...key];
}

function describe(name: string, operation: Operation): Json {
  const { summary, scope, body, answer, method } = operation;
  const content = answer
    ? { 'application/json': { schema: json(answer, 'output') } }
    : { 'application/zip': { schema: { type: 'string', format: 'binary' } } };
  const good =
    method === 'delete'
      ? { '204': { description: 'Done' } }
      : { [method === 'post' && body ? '201' : '200']: { description: 'Done', content } };
  return {
    operationId: name,
    summary,
    security: [{ token: [scope] }],
    parameters: parametersOf(operation),
    ...(body
      ? {
          requestBody: {
            required: true,
            content: { 'application/json': { schema: json(body, 'input') } },
          },
        }
      : {}),
    responses: {
      ...good,
      ...(method === 'get' && answer
        ? { '304': { description: 'As If-None-Match names it' } }
        : {}),
      '400': problem('The request is wrong; `errors` names the fields'),
      '401': problem('No token, or one that does not work (any more)'),
      '403': problem('The token’s scopes or its person’s role do not allow it'),
      '404': problem('There is no such thing in the team'),
      '429': problem('Too many requests; Retry-After says how long to wait'),
    },
  };
}

const headersOfWebhooks: Record<keyof typeof webhookHeaders, string> = {
  event: 'Name of the event',
  delivery: 'Number of the delivery, as in the body; the same when it is sent again',
  timestamp: `When it was signed, seconds since 1970; refuse what is older than ${REPLAY_MINUTES} minutes`,
  signature:
    'One or two of `v1=` and the hex HMAC-SHA256 of "timestamp.body" with a secret of the webhook, separated by commas',
};

const messages: Record<WebhookEvent, { summary: string; schema: z.ZodType }> = {
  'batch.finished': {
    summary: 'Nothing of a batch waits or runs any more. Sent once for each finish',
    schema: batchFinishedSchema,
  },
  'webhook.test': { summary: 'Sent when a lead asks for it', schema: webhookTestSchema },
};

/** What Windlass itself posts to the addresses that leads add. */
function describeWebhooks(): Json {
  const parameters = Object.entries(webhookHeaders).map(([key, name]) => ({
    name,
    in: 'header',
    required: true,
    description: headersOfWebhooks[key as keyof typeof webhookHeaders],
    schema: { type: 'string' },
  }));
  return Object.fromEntries(
    Object.entries(messages).map(([event, { summary, schema }]) => [
      event,
      {
        post: {
          summary,
          parameters,
          requestBody: {
            required: true,
            content: { 'application/json': { schema: json(schema, 'output') } },
          },
          responses: {
            '2XX': { description: 'Taken. Anything else is tried again for about a day' },
          },
        },
      },
    ]),
  );
}

/** The document for the product at an address. */
export function apiDocument(origin: string): Json {
  const paths: Record<string, Json> = {};
  for (const [name, operation] of Object.entries(operations) as [string, Operation][]) {
    paths[operation.path] = {
      ...paths[operation.path],
      [operation.method]: describe(name, operation),
    };
  }
  return {
    openapi: '3.1.0',
    info: {
      title: 'Windlass',
      version: '1',
      description:
        'Submit molecules, follow their batches, and read conformers, torsion profiles, conjugation and strain. Energies in kcal/mol, lengths in Å, angles in degrees, times in UTC.',
    },
    servers: [{ url: `${origin}/api/v1` }],
    paths,
    webhooks: describeWebhooks(),
    components: {
      schemas: { Problem: json(problemSchema, 'output') },
      securitySchemes: { token: { type: 'http', scheme: 'bearer' } },
    },
  };
}
