/** The progress of a batch as it happens: by server-sent events, by asking now and then while those fail. */

export interface BatchProgress {
  readonly counts: Readonly<Record<'queued' | 'running' | 'done' | 'failed' | 'cancelled', number>>;
  /** Share of the work that is done, 0 to 1. */
  readonly share: number;
}

const POLL_MS = 4_000;

/**
 * Follows a batch until the returned function is called. `hear` gets every piece of news; the connection is closed by
 * the caller when nothing is open any more.
 */
export function followProgress(
  batchId: string,
  hear: (progress: BatchProgress) => void,
): () => void {
  let poll: ReturnType<typeof setInterval> | undefined;
  const stopPolling = () => {
    clearInterval(poll);
    poll = undefined;
  };
  const ask = async () => {
    const response = await fetch(`/batches/${batchId}/progress`).catch(() => null);
    if (response?.ok) hear((await response.json()) as BatchProgress);
  };
  const source = new EventSource(`/batches/${batchId}/events`);
  source.addEventListener('progress', ({ data }: MessageEvent<string>) => {
    stopPolling();
    hear(JSON.parse(data) as BatchProgress);
  });
  // The browser keeps trying to connect again by itself; until it does, asking bridges the gap.
  source.addEventListener('error', () => {
    poll ??= setInterval(() => void ask(), POLL_MS);
  });
  return () => {
    source.close();
    stopPolling();
  };
}
