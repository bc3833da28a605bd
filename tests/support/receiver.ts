/** A receiver of webhooks for flow tests: a small HTTP server on this machine that remembers what came. */
import { createServer, type IncomingMessage, type ServerResponse } from 'node:http';
import type { AddressInfo } from 'node:net';

export interface Received {
  readonly method: string;
  readonly path: string;
  readonly headers: IncomingMessage['headers'];
  readonly body: string;
}

type Answer = (response: ServerResponse, received: Received) => void;

/** Answers every request with `answer`, which can be changed at any time. */
export async function startReceiver(first: Answer) {
  const received: Received[] = [];
  let answer = first;
  const server = createServer((request, response) => {
    const chunks: Buffer[] = [];
    request.on('data', (chunk: Buffer) => chunks.push(chunk));
    request.on('end', () => {
      const { method = '', url: path = '', headers } = request;
      const one = { method, path, headers, body: Buffer.concat(chunks).toString('utf8') };
      received.push(one);
      answer(response, one);
    });
  });
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
  const { port } = server.address() as AddressInfo;
  return {
    url: `http://127.0.0.1:${port}/hook`,
    port,
    received,
    answerWith: (next: Answer) => {
      answer = next;
    },
    stop: () => {
      server.closeAllConnections();
      return new Promise<void>((resolve) => server.close(() => resolve()));
    },
  };
}

/** Answers with a status and nothing else. */
export const status =
  (code: number, headers: Record<string, string> = {}): Answer =>
  (response) =>
    response.writeHead(code, headers).end();
