/** Tells a page by server-sent events that the notes of its molecule changed; what they say it asks for itself. */
import { uuidParam } from '$lib/domain/identifiers';
import { listen } from '$lib/server/live';
import { countStream } from '$lib/server/metrics';
import { get } from '$lib/server/molecules';
import { whoAsks } from '$lib/server/teams';
import type { RequestHandler } from './$types';

/** Proxies drop connections that are silent; a comment line keeps them open. */
const KEEP_OPEN_MS = 20_000;

export const GET: RequestHandler = async ({ locals, params }) => {
  const molecule = await get(whoAsks(locals), uuidParam(params.id));
  const encoder = new TextEncoder();
  let end = () => {};
  const stream = new ReadableStream<Uint8Array>({
    async start(controller) {
      const say = (text: string) => controller.enqueue(encoder.encode(text));
      const stopListening = await listen('notes-changed', (id) => {
        if (id === molecule.id || id === '') say('event: changed\ndata:\n\n');
      });
      const stopCounting = countStream('notes');
      const keepOpen = setInterval(() => say(': open\n\n'), KEEP_OPEN_MS);
      end = () => {
        clearInterval(keepOpen);
        stopListening();
        stopCounting();
      };
      say(': open\n\n');
    },
    cancel: () => end(),
  });
  return new Response(stream, {
    headers: { 'content-type': 'text/event-stream', 'cache-control': 'no-store' },
  });
};
