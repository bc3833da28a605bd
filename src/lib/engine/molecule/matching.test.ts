import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { maximumMatching } from './matching';

/** Size of the largest matching by trying everything. */
function largest(
  edges: readonly (readonly [number, number])[],
  used = new Set<number>(),
  from = 0,
): number {
  let best = 0;
  for (let n = from; n < edges.length; n++) {
    const [a, b] = edges[n];
    if (used.has(a) || used.has(b)) continue;
    best = Math.max(best, 1 + largest(edges, new Set([...used, a, b]), n + 1));
  }
  return best;
}

describe('maximumMatching', () => {
  it('is as large as any other, on random graphs with odd rings', () => {
    const vertex = fc.nat(7);
    fc.assert(
      fc.property(fc.array(fc.tuple(vertex, vertex), { maxLength: 13 }), (pairs) => {
        const edges = [
          ...new Map(
            pairs
              .filter(([a, b]) => a !== b)
              .map(([a, b]) => [`${Math.min(a, b)}-${Math.max(a, b)}`, [a, b] as [number, number]]),
          ).values(),
        ];
        const adjacent = Array.from({ length: 8 }, (_, atom) =>
          edges.filter((edge) => edge.includes(atom)).map(([a, b]) => (a === atom ? b : a)),
        );
        const partner = maximumMatching(adjacent);
        let count = 0;
        partner.forEach((other, atom) => {
          if (other < 0) return;
          expect(partner[other]).toBe(atom);
          expect(adjacent[atom]).toContain(other);
          count++;
        });
        expect(count / 2).toBe(largest(edges));
      }),
      { numRuns: 300 },
    );
  });
});
