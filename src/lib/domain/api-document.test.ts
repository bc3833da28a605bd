import { readdirSync, readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { operations } from './api';
import { apiDocument } from './api-document';
import { webhookEvents, webhookHeaders } from './webhooks';

interface DescribedEvent {
  parameters: { name: string }[];
  requestBody: {
    content: Record<
      string,
      { schema: { properties: Record<string, unknown>; required: string[] } }
    >;
  };
}

const document = apiDocument('https://windlass.example') as {
  openapi: string;
  paths: Record<string, Record<string, { operationId: string; parameters: { name: string }[] }>>;
  webhooks: Record<string, { post: DescribedEvent }>;
};

/** What the routes answer: "get /batches/{id}". */
function routed(): string[] {
  const root = new URL('../../routes/api/v1/', import.meta.url).pathname;
  const files = readdirSync(root, { recursive: true, encoding: 'utf8' });
  return files
    .filter((file) => file.endsWith('+server.ts'))
    .flatMap((file) => {
      const path = `/${file.replace(/\/\+server\.ts$/, '')}`.replace(/\[(\w+)\]/g, '{$1}');
      const methods = readFileSync(`${root}${file}`, 'utf8').matchAll(
        /export const (GET|POST|DELETE)/g,
      );
      return [...methods].map(([, method]) => `${method.toLowerCase()} ${path}`);
    });
}

describe('the OpenAPI document', () => {
  it('names every route of the interface, and no other', () => {
    const described = Object.entries(document.paths).flatMap(([path, methods]) =>
      Object.keys(methods).map((method) => `${method} ${path}`),
    );
    expect(described.sort()).toEqual(
      routed()
        .filter((route) => route !== 'get /openapi.json')
        .sort(),
    );
  });

  // OpenAPI 3.1.0, 4.8.12.1: a path parameter is named by the path and required.
  it('declares the parameters of every path', () => {
    for (const { method, path } of Object.values(operations)) {
      const inPath = [...path.matchAll(/\{(\w+)\}/g)].map(([, name]) => name);
      const { parameters } = document.paths[path][method];
      expect(parameters.map(({ name }) => name)).toEqual(expect.arrayContaining(inPath));
    }
  });

  // OpenAPI 3.1.0, 4.8.1: what the product sends by itself stands under `webhooks`.
  it('describes every event with the headers and the body that are sent', () => {
    expect(Object.keys(document.webhooks)).toEqual([...webhookEvents]);
    for (const [event, { post }] of Object.entries(document.webhooks)) {
      expect(post.parameters.map(({ name }) => name)).toEqual(Object.values(webhookHeaders));
      const { properties, required } = post.requestBody.content['application/json'].schema;
      expect(properties['event']).toEqual({ type: 'string', const: event });
      expect(required).toEqual(expect.arrayContaining(['delivery', 'event', 'team']));
    }
  });

  it('is plain JSON with the version people’s tools look for', () => {
    expect(document.openapi).toBe('3.1.0');
    expect(JSON.parse(JSON.stringify(document))).toEqual(document);
  });
});
