/** Fetches the geometries of an answer, once. */
import { browser } from '$app/environment';

const asked = new Map<string, Promise<readonly string[]>>();

/** The molfiles of a result; rejects when they could not be had, and the next call tries again. */
export function fetchGeometries(moleculeId: string, resultId: string): Promise<readonly string[]> {
  // Nothing is looked at while the server writes the page; it shows the waiting text.
  if (!browser) return new Promise(() => undefined);
  const address = `/molecules/${moleculeId}/geometries/${resultId}`;
  const known = asked.get(address);
  if (known) return known;
  const answer = fetch(address).then((response) => {
    if (!response.ok) throw new Error(`geometries: ${response.status}`);
    return response.json() as Promise<string[]>;
  });
  answer.catch(() => asked.delete(address));
  asked.set(address, answer);
  return answer;
}
