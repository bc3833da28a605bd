/** Structure drawings by openchemlib, brought into our atom numbers and colors. */
import type { Molecule } from './molecule';
import { drawConfiguration, isPlainHydrogen, translate } from './openchemlib';

/** A drawn atom or the middle of a drawn bond, in the drawing's own units. */
export interface DrawnAtom {
  readonly atom: number;
  readonly x: number;
  readonly y: number;
}

export interface DrawnBond {
  readonly bond: number;
  readonly x1: number;
  readonly y1: number;
  readonly x2: number;
  readonly y2: number;
}

/** A drawing: SVG markup that stands inside an svg element with this view box, and where atoms and bonds are in it. */
export interface Drawing {
  readonly viewBox: readonly [x: number, y: number, width: number, height: number];
  readonly markup: string;
  readonly atoms: readonly DrawnAtom[];
  readonly bonds: readonly DrawnBond[];
}

/** Room that openchemlib is given, in its units; the drawing is cropped to what it needs. */
const ROOM = 400;
const MARGIN = 8;

/** openchemlib's colors of the elements (CPK), by the names of the variables that stand for them on light and dark. */
const ELEMENT_COLORS: Readonly<Record<string, string>> = {
  'rgb(0,0,0)': 'currentColor',
  'rgb(48,80,248)': 'var(--element-nitrogen, #3050f8)',
  'rgb(255,13,13)': 'var(--element-oxygen, #ff0d0d)',
  'rgb(144,224,80)': 'var(--element-fluorine, #90e050)',
  'rgb(31,240,31)': 'var(--element-chlorine, #1ff01f)',
  'rgb(166,41,41)': 'var(--element-bromine, #a62929)',
  'rgb(148,0,148)': 'var(--element-iodine, #940094)',
  'rgb(198,198,44)': 'var(--element-sulfur, #c6c62c)',
  'rgb(255,128,0)': 'var(--element-phosphorus, #ff8000)',
};

/** Draws a molecule without its plain hydrogens; stereo is shown by wedges. */
export function drawMolecule(molecule: Molecule): Drawing {
  const shown = Array.from({ length: molecule.atomCount }, (_, atom) => atom).filter(
    (atom) => !isPlainHydrogen(molecule, atom),
  );
  const { ocl, fromOcl } = translate(molecule, shown);
  drawConfiguration(ocl);
  const svg = ocl.toSVG(ROOM, ROOM, 'drawing', {
    autoCrop: true,
    autoCropMargin: MARGIN,
    maxAVBL: 28,
    noStereoProblem: true,
    suppressChiralText: true,
    suppressCIPParity: true,
    suppressESR: true,
  });
  const [, box] = /viewBox="([^"]*)"/.exec(svg) ?? [];
  const [x, y, width, height] = box.split(' ').map(Number);
  const bondOf = (n: number): number => {
    const ends = [fromOcl[ocl.getBondAtom(0, n)], fromOcl[ocl.getBondAtom(1, n)]];
    return molecule.bonds.findIndex(({ a, b }) => ends.includes(a) && ends.includes(b));
  };
  return {
    viewBox: [x, y, width, height],
    markup: visibleMarkup(svg),
    atoms: marks(svg, 'Atom').map(({ index, at }) => ({
      atom: fromOcl[index],
      x: at('cx'),
      y: at('cy'),
    })),
    bonds: marks(svg, 'Bond').map(({ index, at }) => ({
      bond: bondOf(index),
      x1: at('x1'),
      y1: at('y1'),
      x2: at('x2'),
      y2: at('y2'),
    })),
  };
}

/** The visible elements, one a line, without openchemlib's own style and its marks for the mouse. */
function visibleMarkup(svg: string): string {
  return svg
    .split('\n')
    .filter((line) => /^\s*<(text|line|polygon|circle|ellipse|path)\b/.test(line))
    .filter((line) => !line.includes('class="event"'))
    .map((line) =>
      line
        .trim()
        .replace(/rgb\(\d+,\d+,\d+\)/g, (color) => ELEMENT_COLORS[color] ?? 'currentColor')
        .replace('<text', '<text font-family="inherit"')
        .replace('<line', '<line stroke-linecap="round"'),
    )
    .join('');
}

/** openchemlib's invisible marks on atoms or bonds, by its own numbers. */
function marks(svg: string, kind: 'Atom' | 'Bond') {
  return svg.split('\n').flatMap((line) => {
    const [, index] = new RegExp(`id="drawing:${kind}:(\\d+)"`).exec(line) ?? [];
    if (index === undefined) return [];
    const at = (name: string): number => Number(new RegExp(`\\b${name}="([^"]*)"`).exec(line)?.[1]);
    return [{ index: Number(index), at }];
  });
}
