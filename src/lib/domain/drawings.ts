/** Structure drawings as stand-alone SVG documents. */

/** What the engine draws: markup for a view box. */
export interface DrawnStructure {
  readonly viewBox: readonly [x: number, y: number, width: number, height: number];
  readonly markup: string;
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
