/** Takes an upload as a stream of bytes and answers with its progress, one JSON object a line, while it is read. */
import { error } from '@sveltejs/kit';
import { draftQuerySchema, type ReadingNews } from '$lib/domain/submission';
import { readUpload } from '$lib/server/drafts';
import { log } from '$lib/server/log';
import { require } from '$lib/server/member';
import { limitRate } from '$lib/server/rate-limits';
import { UploadError } from '$lib/server/rows';
import { whoAsks } from '$lib/server/teams';
import type { RequestHandler } from './$types';

export const POST: RequestHandler = async ({ locals, url, request }) => {
  const member = whoAsks(locals);
  require(member, 'submit molecules');
  const query = draftQuerySchema.safeParse(Object.fromEntries(url.searchParams));
  if (!query.success) error(400, query.error.issues[0].message);
  const wait = await limitRate(['submit as a member', member.userId]);
  if (wait !== null) error(429, `That was a lot of uploads. Wait ${wait} seconds.`);
  const { body } = request;
  if (!body) error(400, 'There is nothing in this upload.');

  const encoder = new TextEncoder();
  const stream = new ReadableStream<Uint8Array>({
    async start(controller) {
      const tell = (news: ReadingNews) =>
        controller.enqueue(encoder.encode(`${JSON.stringify(news)}\n`));
      try {
        const draftId = await readUpload(member, query.data, body, tell);
        tell({ draftId });
      } catch (cause) {
        if (!(cause instanceof UploadError)) log.error({ error: cause }, 'An upload failed');
        tell({
          fault:
            cause instanceof UploadError
              ? cause.message
              : 'Reading stopped through a fault on our side. Nothing was stored; try again.',
        });
      }
      controller.close();
    },
  });
  return new Response(stream, {
    headers: { 'content-type': 'application/x-ndjson', 'cache-control': 'no-store' },
  });
};
