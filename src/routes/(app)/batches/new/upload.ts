/** Sends an upload as a stream and hears of its progress while the server reads it. */
import type { Format, Reading, ReadingNews } from '$lib/domain/submission';

export interface Upload {
  readonly body: Blob;
  readonly format: Format;
  readonly name: string;
  readonly source: 'paste' | 'draw' | 'upload';
  readonly reading: Reading;
}

export interface UploadProgress {
  readonly rows: number;
  readonly errors: number;
}

type Answer = { readonly draftId: string } | { readonly fault: string };

const CUT_OFF = 'The connection broke while the file was read. Nothing was stored; try again.';

/** Resolves with the draft that was made, or with a sentence that says why there is none. */
export async function sendUpload(
  { body, format, name, source, reading }: Upload,
  report: (progress: UploadProgress) => void,
): Promise<Answer> {
  const query = new URLSearchParams({ format, name, source, reading: JSON.stringify(reading) });
  try {
    const response = await fetch(`/batches/drafts?${query}`, {
      method: 'POST',
      body,
      headers: { 'content-type': 'application/octet-stream', accept: 'application/json' },
    });
    if (!response.ok || !response.body) return { fault: await faultOf(response) };
    for await (const news of newsOf(response.body)) {
      if ('draftId' in news || 'fault' in news) return news;
      report(news);
    }
    return { fault: CUT_OFF };
  } catch {
    return { fault: CUT_OFF };
  }
}

async function faultOf(response: Response): Promise<string> {
  const answer: unknown = await response.json().catch(() => null);
  const said = answer && typeof answer === 'object' && 'message' in answer ? answer.message : null;
  return typeof said === 'string' ? said : 'The server did not take the upload. Try again.';
}

async function* newsOf(stream: ReadableStream<Uint8Array>): AsyncGenerator<ReadingNews> {
  const reader = stream.getReader();
  const decoder = new TextDecoder();
  let rest = '';
  for (;;) {
    const { done, value } = await reader.read();
    if (done) return;
    const lines = (rest + decoder.decode(value, { stream: true })).split('\n');
    rest = lines.pop() ?? '';
    for (const line of lines) yield JSON.parse(line) as ReadingNews;
  }
}
