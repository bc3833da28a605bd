/**
 * How many minima of the labelled molecule a conformer stands for.
 *
 * Let F be the renumberings of the visible atoms, each with or without a mirror, that turns about single bonds, ring
 * puckering and inversion of amines can bring about: they keep the handedness of every tetrahedral center and the sides
 * of every double bond (the molecular symmetry group of a non-rigid molecule; Longuet-Higgins, Mol. Phys. 1963, 6, 445).
 * A conformer whose own symmetry is the subgroup S of F has |F|/|S| labelled copies. Turns of symmetric tops
 * (tert-butyl, phenyl, carboxylate, two equal branches of an amine) form the subgroup T: what differs by them only looks
 * the same, so the number is divided by that of a top's turns, |T|/|T ∩ S| (their greatest common divisor over
 * all conformers, so that the ratios, which rule the populations, stay exact).
 *
 * Butane: anti 1, gauche 2. Pentane: anti-anti 1, anti-gauche 4, gauche-gauche 2. Cyclohexane: chair 2, twist-boat 6.
 */
import { isCis, handedness } from '../molecule/stereo';
import type { Molecule } from '../molecule/molecule';
import { bestRmsd } from '../superpose';
import { atomShapes } from './ideal-geometry';
import { collectSide } from './drives';
import { forEachMatching } from './matchings';
import { SAME_DISTANCE, SAME_RMSD, mirrorImage } from './sameness';
import type { VisibleGraph } from './visible-graph';

/** A renumbering: where each visible place goes, and whether a mirror belongs to it. */
interface Symmetry {
  readonly image: Int32Array;
  readonly mirrored: boolean;
}

/** Renumberings beyond which only mirror images are counted. */
const MOST_SYMMETRIES = 5000;

/** The degeneracies of conformers of one molecule, in their order. */
export function degeneracies(
  molecule: Molecule,
  graph: VisibleGraph,
  conformers: readonly Float64Array[],
): number[] {
  if (conformers.length === 0) return [];
  const feasible = feasibleSymmetries(molecule, graph, conformers[0]);
  if (!feasible) return conformers.map((x) => (ownSymmetries(graph, x).some(isMirror) ? 1 : 2));
  const tops = topTurns(molecule, graph, feasible);
  const isFeasible = new Set(feasible.map(keyOf));
  const counts = conformers.map((x) => {
    const own = ownSymmetries(graph, x)
      .map(keyOf)
      .filter((key) => isFeasible.has(key));
    const ownTurns = own.filter((key) => tops.has(key));
    return { copies: feasible.length / own.length, turns: tops.size / ownTurns.length };
  });
  // A conformer may be its own image under half of the turns; the divisor then has to go into its copies, too.
  const divisor = counts
    .flatMap(({ turns, copies }) => [turns, copies])
    .reduce(greatestCommonDivisor);
  return counts.map(({ copies }) => copies / divisor);
}

function isMirror({ mirrored }: Symmetry): boolean {
  return mirrored;
}

function keyOf({ image, mirrored }: Symmetry): string {
  return `${mirrored}:${image.join()}`;
}

function greatestCommonDivisor(a: number, b: number): number {
  return b === 0 ? a : greatestCommonDivisor(b, a % b);
}

/** The group F; null when it is too large to list. */
function feasibleSymmetries(
  molecule: Molecule,
  graph: VisibleGraph,
  x: Float64Array,
): Symmetry[] | null {
  const keepsMolecule = createFeasibilityTest(molecule, graph, x);
  const symmetries: Symmetry[] = [];
  const finished = forEachMatching(graph, null, (image) => {
    for (const mirrored of [false, true]) {
      if (!keepsMolecule({ image, mirrored })) continue;
      symmetries.push({ image: image.slice(), mirrored });
    }
    return symmetries.length <= MOST_SYMMETRIES;
  });
  return finished && symmetries.length <= MOST_SYMMETRIES ? symmetries : null;
}

/** Tells whether a renumbering keeps the handedness of centers and the sides of double bonds of a geometry. */
function createFeasibilityTest(
  molecule: Molecule,
  graph: VisibleGraph,
  x: Float64Array,
): (symmetry: Symmetry) => boolean {
  const places = new Map(Array.from(graph.order, (atom, place) => [atom, place]));
  const centers = fixedCenters(molecule, places);
  const sides = fixedSides(molecule, places);
  return ({ image, mirrored }) => {
    const to = (atom: number): number => image[places.get(atom)!];
    const keepsCenters = centers.every(({ atom, neighbors, hidden }) => {
      const isRight = handedness(x, atom, complete(neighbors, hidden)) > 0;
      const imageHidden = hidden === null ? null : hiddenNeighbor(molecule, to(atom), places);
      const mapped = complete(neighbors.map(to), imageHidden);
      return handedness(x, to(atom), mapped) > 0 === (isRight !== mirrored);
    });
    return (
      keepsCenters &&
      sides.every(
        ([a, b, c, d]) => isCis(x, [a, b, c, d]) === isCis(x, [to(a), to(b), to(c), to(d)]),
      )
    );
  };
}

interface FixedCenter {
  readonly atom: number;
  /** Visible neighbors. */
  readonly neighbors: readonly number[];
  /** The one hydrogen that is not visible, -1 for a lone pair, null for none. */
  readonly hidden: number | null;
}

/** Tetrahedral centers that cannot be turned inside out: not those with two hidden hydrogens, nor amines. */
function fixedCenters(molecule: Molecule, places: ReadonlyMap<number, number>): FixedCenter[] {
  const shapes = atomShapes(molecule);
  const stereo = new Set(molecule.stereocenters.map(({ atom }) => atom));
  return Array.from(places.keys()).flatMap((atom) => {
    const all = molecule.neighbors[atom];
    const neighbors = all.map((neighbor) => neighbor.atom).filter((other) => places.has(other));
    if (shapes[atom] !== 'tetrahedral' || all.length < 3 || neighbors.length < 3) return [];
    if (all.length === 4) {
      const hidden = neighbors.length === 4 ? null : hiddenNeighbor(molecule, atom, places);
      return [{ atom, neighbors, hidden }];
    }
    const inverts = molecule.atomicNumbers[atom] === 7 && !stereo.has(atom);
    return inverts ? [] : [{ atom, neighbors, hidden: -1 }];
  });
}

function hiddenNeighbor(
  molecule: Molecule,
  atom: number,
  places: ReadonlyMap<number, number>,
): number {
  return molecule.neighbors[atom].find((neighbor) => !places.has(neighbor.atom))?.atom ?? -1;
}

function complete(
  neighbors: readonly number[],
  hidden: number | null,
): [number, number, number, number] {
  const [a, b, c, d] = hidden === null ? neighbors : [...neighbors, hidden];
  return [a, b, c, d];
}

/** Chains a-b=c-d of visible atoms over double bonds, which no turn carries to the other side. */
function fixedSides(
  molecule: Molecule,
  places: ReadonlyMap<number, number>,
): [number, number, number, number][] {
  const around = (atom: number, but: number): number[] =>
    molecule.neighbors[atom].map(({ atom: a }) => a).filter((a) => a !== but && places.has(a));
  return molecule.bonds.flatMap(({ a: b, b: c, order }, bond) => {
    if (order !== 2 || molecule.ringBonds[bond] || !places.has(b) || !places.has(c)) return [];
    return around(b, c).flatMap((a) =>
      around(c, b).map((d): [number, number, number, number] => [a, b, c, d]),
    );
  });
}

/** The group S of a geometry. */
function ownSymmetries(graph: VisibleGraph, x: Float64Array): Symmetry[] {
  const mirror = mirrorImage(x);
  const symmetries: Symmetry[] = [];
  forEachMatching(graph, { from: x, to: x, tolerance: SAME_DISTANCE }, (image) => {
    for (const mirrored of [false, true]) {
      if (bestRmsd(mirrored ? mirror : x, x, graph.order, image) > SAME_RMSD) continue;
      symmetries.push({ image: image.slice(), mirrored });
    }
    return symmetries.length <= MOST_SYMMETRIES;
  });
  return symmetries;
}

/** The keys of the group T, generated by the feasible renumberings that leave all on one side of an axis in place. */
function topTurns(
  molecule: Molecule,
  graph: VisibleGraph,
  feasible: readonly Symmetry[],
): Set<string> {
  const sides = axisSides(molecule, graph);
  const generators = feasible.filter(
    ({ image, mirrored }) =>
      !mirrored && sides.some((side) => side.every((place) => image[place] === graph.order[place])),
  );
  const places = new Map(Array.from(graph.order, (atom, place) => [atom, place]));
  const identity: Symmetry = { image: graph.order, mirrored: false };
  const group = new Map([[keyOf(identity), identity]]);
  for (const element of group.values()) {
    for (const generator of generators) {
      const image = element.image.map((atom) => generator.image[places.get(atom)!]);
      const product = { image, mirrored: false };
      const key = keyOf(product);
      if (!group.has(key)) group.set(key, product);
    }
  }
  return new Set(group.keys());
}

/** Per axis and end: the places of both its atoms and of all that hangs on that end. */
function axisSides(molecule: Molecule, graph: VisibleGraph): number[][] {
  const places = new Map(Array.from(graph.order, (atom, place) => [atom, place]));
  const isAmine = (atom: number): boolean =>
    molecule.atomicNumbers[atom] === 7 && molecule.neighbors[atom].length === 3;
  return molecule.bonds.flatMap(({ a, b }, bond) => {
    if (molecule.ringBonds[bond] || !places.has(a) || !places.has(b)) return [];
    const isTerminal = [a, b].some((atom) => graph.adjacent[atom].length === 1);
    if (isTerminal && !isAmine(a) && !isAmine(b)) return [];
    return [
      [a, b],
      [b, a],
    ].map(([root, start]) =>
      [root, start, ...collectSide(molecule, root, [start])].flatMap((atom) => {
        const place = places.get(atom);
        return place === undefined ? [] : [place];
      }),
    );
  });
}
