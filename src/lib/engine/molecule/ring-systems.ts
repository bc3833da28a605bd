/** Ring systems: rings that share atoms, taken as one. */
import type { Molecule } from './molecule';

/** The ring systems of a molecule, each as its atoms in ascending order; the largest first. */
export function ringSystems({ rings }: Molecule): number[][] {
  const systems: Set<number>[] = [];
  for (const ring of rings) {
    const joined = new Set(ring);
    for (let n = systems.length - 1; n >= 0; n--) {
      if (!ring.some((atom) => systems[n].has(atom))) continue;
      for (const atom of systems[n]) joined.add(atom);
      systems.splice(n, 1);
    }
    systems.push(joined);
  }
  return systems
    .map((system) => [...system].sort((a, b) => a - b))
    .sort((a, b) => b.length - a.length || a[0] - b[0]);
}
