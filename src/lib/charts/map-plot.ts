/** A map of two bonds as a stand-alone SVG document, for bundles. */
import { inUnit, type EnergyUnit } from '../domain/energy-units';
import { minimumName } from '../domain/map-way';
import { energyColor } from './energy-scale';
import type { MapEnergies } from './fine-grid';
import { layMap } from './map-layout';
import { linearScale } from './scale';
import { escapeText } from './svg-text';

export interface PlottedMap extends MapEnergies {
  readonly title: string;
  /** In which energies are drawn; kcal/mol where it is not said. */
  readonly unit?: EnergyUnit;
  /** Names of the two torsions. */
  readonly axes: readonly [string, string] | readonly string[];
  readonly minima: readonly { readonly angles: readonly [number, number] }[];
}

const SIZE = 440;
const LEFT = 72;
const TOP = 44;
const RIGHT = 110;
const BOTTOM = 60;
const TICKS = [-180, -120, -60, 0, 60, 120, 180];

/** Draws a map in the unit with its contours, its minima by letter and its scale. */
export function mapPlot({ title, axes, minima, unit = 'kcal/mol', ...map }: PlottedMap): string {
  const energies = map.energies.map((energy) => (energy === null ? null : inUnit(energy, unit)));
  const { bands, contours } = layMap({ ...map, energies }, SIZE);
  const x = linearScale([-180, 180], [0, SIZE]);
  const [width, height] = [LEFT + SIZE + RIGHT, TOP + SIZE + BOTTOM];
  const halo = 'paint-order="stroke" stroke="#ffffff" stroke-width="3"';
  const legend = bands.map(({ share, from, to }, n) => {
    const y = SIZE - 18 * (n + 1);
    return (
      `<rect x="${SIZE + 16}" y="${y}" width="16" height="18" fill="${energyColor(share, 'light')}"/>` +
      `<text x="${SIZE + 38}" y="${y + 13}">${to === null ? `≥ ${from}` : `${from} to ${to}`}</text>`
    );
  });
  return [
    `<svg xmlns="http://www.w3.org/2000/svg" width="${width}" height="${height}" viewBox="0 0 ${width} ${height}" font-family="Rubik, sans-serif" font-size="12" fill="#16242b">`,
    `<title>${escapeText(title)}</title>`,
    `<rect width="${width}" height="${height}" fill="#ffffff"/>`,
    `<text x="${LEFT}" y="24" font-size="15" font-weight="600">${escapeText(title)}</text>`,
    `<g transform="translate(${LEFT} ${TOP})">`,
    ...bands.map(({ share, path }) => `<path d="${path}" fill="${energyColor(share, 'light')}"/>`),
    ...contours.map(
      ({ path }) => `<path d="${path}" fill="none" stroke="#16242b" stroke-width="0.6"/>`,
    ),
    ...contours.flatMap(({ level, label }) =>
      label
        ? [
            `<text x="${label[0].toFixed(1)}" y="${(label[1] + 4).toFixed(1)}" text-anchor="middle" font-size="11" ${halo}>${level}</text>`,
          ]
        : [],
    ),
    ...minima.map(({ angles: [first, second] }, n) => {
      const [cx, cy] = [x(first).toFixed(1), SIZE - x(second)];
      return (
        `<circle cx="${cx}" cy="${cy.toFixed(1)}" r="3.5" fill="#0b6e6e" stroke="#ffffff"/>` +
        `<text x="${cx}" y="${(cy - 7).toFixed(1)}" text-anchor="middle" font-weight="600" ${halo}>${minimumName(n)}</text>`
      );
    }),
    `<rect width="${SIZE}" height="${SIZE}" fill="none" stroke="#51616a"/>`,
    ...TICKS.map(
      (tick) =>
        `<text x="${x(tick)}" y="${SIZE + 18}" text-anchor="middle">${tick}°</text>` +
        `<text x="-8" y="${SIZE - x(tick) + 4}" text-anchor="end">${tick}°</text>`,
    ),
    `<text x="${SIZE / 2}" y="${SIZE + 44}" text-anchor="middle">${escapeText(axes[0])} / degrees</text>`,
    `<text transform="translate(-54 ${SIZE / 2}) rotate(-90)" text-anchor="middle">${escapeText(axes[1])} / degrees</text>`,
    ...legend,
    `<text x="${SIZE + 16}" y="${SIZE - 18 * bands.length - 10}">${unit}</text>`,
    '</g>',
    '</svg>',
    '',
  ].join('\n');
}
