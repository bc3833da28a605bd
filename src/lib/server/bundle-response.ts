/** A bundle as a download: bytes go out as they are made, whatever the size. */
import { Readable } from 'node:stream';
import type { Bundle } from './bundles';

export function bundleResponse({ fileName, archive }: Bundle): Response {
  return new Response(Readable.toWeb(archive) as ReadableStream<Uint8Array>, {
    headers: {
      'content-type': 'application/zip',
      'content-disposition': `attachment; filename="${fileName}"`,
      'cache-control': 'no-store',
    },
  });
}
