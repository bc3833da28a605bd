/** Reads the configuration from a drawing: wedges at centers, and the sides of double bonds. */
import type { RawMolfile } from './connection-table';
import type { RawCenter, RawDoubleBond } from './raw';
import { handedness } from './stereo';

/** Handedness below which a drawing says nothing: neighbors in a line, wedges that contradict each other. */
const AMBIGUOUS = 0.15;
/** Sine of the angle to the double bond below which a neighbor lies on neither side. */
const IN_LINE = 0.05;

/** The configurations a drawing states, with -1 for implicit hydrogens and lone pairs. */
export function drawnConfiguration(file: RawMolfile): {
  centers: RawCenter[];
  doubleBonds: RawDoubleBond[];
} {
  const neighbors = file.molecule.atoms.map(() => [] as number[]);
  for (const { a, b } of file.molecule.bonds) {
    neighbors[a].push(b);
    neighbors[b].push(a);
  }
  return {
    centers: drawnCenters(file, neighbors),
    doubleBonds: drawnDoubleBonds(file, neighbors),
  };
}

function drawnCenters(file: RawMolfile, neighbors: readonly number[][]): RawCenter[] {
  // Height of a neighbor above the paper, by center; a wedge speaks for the atom at its narrow end only.
  const heights = new Map<number, Map<number, number>>();
  const open = new Set<number>();
  for (const [bond, wedge] of file.wedges) {
    const { a, b } = file.molecule.bonds[bond];
    if (wedge === 'either') open.add(a);
    else heights.set(a, (heights.get(a) ?? new Map()).set(b, wedge === 'up' ? 1 : -1));
  }
  const centers: RawCenter[] = [];
  for (const [atom, above] of heights) {
    const around = neighbors[atom];
    if (open.has(atom) || around.length < 3 || around.length > 4) continue;
    const order = [...around, ...(around.length === 3 ? [-1] : [])] as RawCenter['neighbors'];
    const sign = handedness(raisedNeighbors(file, atom, around, above), 0, [1, 2, 3, 4]);
    if (Math.abs(sign) < AMBIGUOUS) continue;
    centers.push({ atom, neighbors: order, clockwise: sign > 0 });
  }
  return centers;
}

/**
 * The center at the origin, then its neighbors at unit distance on the paper, raised or lowered by their wedges. A
 * fourth neighbor that is not drawn stands opposite the others and rather above or below than beside them, so that a
 * T of three bonds with a wedge for its stem still tells.
 */
function raisedNeighbors(
  file: RawMolfile,
  atom: number,
  around: readonly number[],
  above: ReadonlyMap<number, number>,
): Float64Array {
  const x = new Float64Array(15);
  around.forEach((neighbor, n) => {
    const dx = file.coordinates[3 * neighbor] - file.coordinates[3 * atom];
    const dy = file.coordinates[3 * neighbor + 1] - file.coordinates[3 * atom + 1];
    const length = Math.hypot(dx, dy) || 1;
    x.set([dx / length, dy / length, above.get(neighbor) ?? 0], 3 * n + 3);
  });
  if (around.length === 3) {
    const opposite = (axis: number): number => -(x[3 + axis] + x[6 + axis] + x[9 + axis]);
    x.set([0.8 * opposite(0), 0.8 * opposite(1), opposite(2)], 12);
  }
  return x;
}

function drawnDoubleBonds(file: RawMolfile, neighbors: readonly number[][]): RawDoubleBond[] {
  const wavy = new Set<number>();
  for (const [bond, wedge] of file.wedges) {
    if (wedge === 'either') wavy.add(file.molecule.bonds[bond].a);
  }
  const found: RawDoubleBond[] = [];
  file.molecule.bonds.forEach(({ a, b, order }, bond) => {
    if (order !== 2 || file.openDoubleBonds.has(bond) || wavy.has(a) || wavy.has(b)) return;
    const left = neighborOnSide(file, neighbors, a, b);
    const right = neighborOnSide(file, neighbors, b, a);
    if (!left || !right) return;
    // Seen from either end the same turn means opposite sides of the bond.
    found.push({ atoms: [left.atom, a, b, right.atom], cis: left.side !== right.side });
  });
  return found;
}

/** The first neighbor of `atom` beside `other` and its side of the bond; null when neighbors share a side or none is off line. */
function neighborOnSide(
  file: RawMolfile,
  neighbors: readonly number[][],
  atom: number,
  other: number,
): { atom: number; side: number } | null {
  const [ux, uy] = paperDirection(file, atom, other);
  const sides = neighbors[atom]
    .filter((neighbor) => neighbor !== other)
    .map((neighbor) => {
      const [vx, vy] = paperDirection(file, atom, neighbor);
      return { atom: neighbor, sine: ux * vy - uy * vx };
    });
  if (sides.length === 0 || sides.length > 2) return null;
  if (sides.some(({ sine }) => Math.abs(sine) < IN_LINE)) return null;
  if (sides.length === 2 && sides[0].sine * sides[1].sine > 0) return null;
  return { atom: sides[0].atom, side: Math.sign(sides[0].sine) };
}

function paperDirection(file: RawMolfile, from: number, to: number): [number, number] {
  const dx = file.coordinates[3 * to] - file.coordinates[3 * from];
  const dy = file.coordinates[3 * to + 1] - file.coordinates[3 * from + 1];
  const length = Math.hypot(dx, dy) || 1;
  return [dx / length, dy / length];
}
