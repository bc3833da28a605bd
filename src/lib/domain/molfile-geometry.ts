/** The geometry in a V2000 molfile: read out, and written back in the place of the one that is there. */

/** x, y, z of every atom, 3N, Å. */
export function coordinatesOf(molfile: string): Float64Array {
  const lines = molfile.split('\n');
  const atomCount = atomCountOf(lines);
  const coordinates = new Float64Array(3 * atomCount);
  for (let atom = 0; atom < atomCount; atom++) {
    for (let axis = 0; axis < 3; axis++) {
      coordinates[3 * atom + axis] = Number(
        lines[FIRST_ATOM_LINE + atom].slice(WIDTH * axis, WIDTH * (axis + 1)),
      );
    }
  }
  return coordinates;
}

/** The same molfile with another geometry (3N, Å). */
export function withCoordinates(molfile: string, coordinates: Readonly<Float64Array>): string {
  const lines = molfile.split('\n');
  for (let atom = 0; atom < atomCountOf(lines); atom++) {
    const place = [0, 1, 2]
      .map((axis) => coordinates[3 * atom + axis].toFixed(4).padStart(WIDTH))
      .join('');
    lines[FIRST_ATOM_LINE + atom] = place + lines[FIRST_ATOM_LINE + atom].slice(3 * WIDTH);
  }
  return lines.join('\n');
}

const FIRST_ATOM_LINE = 4;
/** Columns of one coordinate. */
const WIDTH = 10;

function atomCountOf(lines: readonly string[]): number {
  return Number(lines[FIRST_ATOM_LINE - 1].slice(0, 3));
}
