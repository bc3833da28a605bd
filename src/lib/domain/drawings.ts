/** Structure drawings as stand-alone SVG documents. */

/** What the engine draws: markup for a view box. */
export interface DrawnStructure {
  readonly viewBox: readonly [x: number, y: number, width: number, height: number];
  readonly markup: string;
}

/** A drawing with the places of its atoms, so that things can be written beside them. */
export interface PlacedStructure extends DrawnStructure {
  readonly atoms: readonly { readonly atom: number; readonly x: number; readonly y: number }[];
  readonly bonds: readonly {
    readonly x1: number;
    readonly y1: number;
    readonly x2: number;
    readonly y2: number;
  }[];
}

interface Place {
  readonly x: number;
  readonly y: number;
}

/** Where an atom is drawn; null for one that is not, like a plain hydrogen. */
export function placeOf({ atoms }: PlacedStructure, atom: number): Place | null {
  return atoms.find((drawn) => drawn.atom === atom) ?? null;
}

/** The freer of the two places beside the middle of a bond, `away` units from it. */
export function besideBond(drawing: PlacedStructure, from: Place, to: Place, away: number): Place {
  const middle = { x: (from.x + to.x) / 2, y: (from.y + to.y) / 2 };
  const length = Math.hypot(to.x - from.x, to.y - from.y) || 1;
  const across = { x: (-away * (to.y - from.y)) / length, y: (away * (to.x - from.x)) / length };
  return freest(
    drawing,
    [1, -1].map((side) => ({ x: middle.x + side * across.x, y: middle.y + side * across.y })),
  );
}

/** The freest of eight places round an atom, `away` units from it. */
export function besideAtom(drawing: PlacedStructure, { x, y }: Place, away: number): Place {
  return freest(
    drawing,
    Array.from({ length: 8 }, (_, n) => {
      const angle = (Math.PI / 4) * n - Math.PI / 2;
      return { x: x + away * Math.cos(angle), y: y + away * Math.sin(angle) };
    }),
  );
}

/** The place where everything drawn is farthest away, near things counting most; of equal ones the first. */
function freest({ bonds, atoms }: PlacedStructure, places: readonly Place[]): Place {
  const crowding = ({ x, y }: Place): number =>
    [
      ...bonds.map((bond) => distanceToLine({ x, y }, bond)),
      ...atoms.map((atom) => Math.hypot(x - atom.x, y - atom.y)),
    ].reduce((sum, distance) => sum + 1 / Math.max(1, distance) ** 2, 0);
  return places.reduce((best, place) => (crowding(place) < crowding(best) - 1e-9 ? place : best));
}

function distanceToLine({ x, y }: Place, line: PlacedStructure['bonds'][number]): number {
  const [dx, dy] = [line.x2 - line.x1, line.y2 - line.y1];
  const along = ((x - line.x1) * dx + (y - line.y1) * dy) / (dx * dx + dy * dy || 1);
  const nearest = Math.min(1, Math.max(0, along));
  return Math.hypot(x - line.x1 - nearest * dx, y - line.y1 - nearest * dy);
}

/** The page's colors, which an image cannot inherit; nitrogen and the like are brightened on dark paper. */
const COLORS = `svg{color:#16242b;font-family:sans-serif;
--element-nitrogen:#3050f8;--element-oxygen:#d40d0d;--element-sulfur:#8a7a00;--element-chlorine:#157f15;--element-fluorine:#4d7f1e;--element-bromine:#a62929;--element-iodine:#940094;--element-phosphorus:#b35900}
@media (prefers-color-scheme:dark){svg{color:#e9eef0;
--element-nitrogen:#8ea2ff;--element-oxygen:#ff6b6b;--element-sulfur:#e0c94a;--element-chlorine:#5fd35f;--element-fluorine:#a4e060;--element-bromine:#e08a8a;--element-iodine:#d98ad9;--element-phosphorus:#ffa04d}}`;

/** A complete SVG document of a drawing. */
export function svgDocument({ viewBox, markup }: DrawnStructure): string {
  const [, , width, height] = viewBox;
  return `<svg xmlns="http://www.w3.org/2000/svg" viewBox="${viewBox.join(' ')}" width="${width}" height="${height}"><style>${COLORS}</style>${markup}</svg>`;
}
