/** The progress of a batch as server-sent events, at most twice a second. */
import { uuidParam } from '$lib/domain/identifiers';
import * as batches from '$lib/server/batches';
import { listen } from '$lib/server/live';
import { log } from '$lib/server/log';
import { countStream } from '$lib/server/metrics';
import { whoAsks } from '$lib/server/teams';
import type { RequestHandler } from './$types';

const SHORTEST_PAUSE_MS = 500;
/** Proxies drop connections that are silent; a comment line keeps them open. */
const KEEP_OPEN_MS = 20_000;

export const GET: RequestHandler = async ({ locals, params }) => {
  const member = whoAsks(locals);
  const batch = await batches.get(member, uuidParam(params.id));
  const encoder = new TextEncoder();
  /** What has to be undone when the page is closed, which can be at any moment, also while all this begins. */
  const undo: (() => void)[] = [];
  let isOpen = true;
  const end = () => {
    isOpen = false;
    for (const each of undo.splice(0)) each();
  };
  const stream = new ReadableStream<Uint8Array>({
    async start(controller) {
      let timer: ReturnType<typeof setTimeout> | undefined;
      const say = (text: string) => isOpen && controller.enqueue(encoder.encode(text));
      const send = async () => {
        timer = undefined;
        try {
          const progress = await batches.progress(member, batch.id);
          say(`event: progress\ndata: ${JSON.stringify(progress)}\n\n`);
        } catch (error) {
          // The page polls when news stop coming; the next change tries again.
          log.warn({ error, batch: batch.id }, 'Progress could not be read');
        }
      };
      const changed = (id: string) => {
        if (id !== batch.id && id !== '') return;
        timer ??= setTimeout(() => void send(), SHORTEST_PAUSE_MS);
      };
      const keepOpen = setInterval(() => say(': open\n\n'), KEEP_OPEN_MS);
      undo.push(() => clearInterval(keepOpen));
      undo.push(() => clearTimeout(timer));
      undo.push(countStream('batch'));
      undo.push(await listen('batch-changed', changed));
      if (isOpen) await send();
      else end();
    },
    cancel: end,
  });
  return new Response(stream, {
    headers: { 'content-type': 'text/event-stream', 'cache-control': 'no-store' },
  });
};
