/** An energy profile as a stand-alone SVG document, for bundles and downloads. */
import { inUnit, type EnergyUnit } from '../domain/energy-units';
import { linearScale, roundTicks } from './scale';
import { escapeText } from './svg-text';

export interface PlottedProfile {
  readonly title: string;
  /** In which energies are drawn; kcal/mol where it is not said. */
  readonly unit?: EnergyUnit;
  /** Energies above the lowest, kcal/mol, ascending in angle over (-180, 180]. */
  readonly points: readonly { readonly angle: number; readonly relative: number }[];
  readonly stationary: readonly {
    readonly kind: 'minimum' | 'maximum';
    readonly angle: number;
    readonly relative: number;
    readonly label: string;
  }[];
}

const WIDTH = 640;
const HEIGHT = 400;
const MARGIN = { left: 64, right: 20, top: 40, bottom: 56 };

const round = (value: number): string => value.toFixed(1);

/** Draws a profile with axes in degrees and the unit, and its stationary points by name. */
export function profilePlot({ title, unit = 'kcal/mol', ...profile }: PlottedProfile): string {
  const drawn = <Point extends { readonly relative: number }>(point: Point): Point => ({
    ...point,
    relative: inUnit(point.relative, unit),
  });
  const points = profile.points.map(drawn);
  const stationary = profile.stationary.map(drawn);
  const ticks = roundTicks(Math.max(0.1, ...points.map(({ relative }) => relative)));
  const x = linearScale([-180, 180], [MARGIN.left, WIDTH - MARGIN.right]);
  const y = linearScale([0, ticks[ticks.length - 1]], [HEIGHT - MARGIN.bottom, MARGIN.top]);
  // The point at 180 stands at both ends of the axis.
  const last = points[points.length - 1];
  const curve = last?.angle === 180 ? [{ ...last, angle: -180 }, ...points] : points;
  const line = curve.map(({ angle, relative }) => `${round(x(angle))},${round(y(relative))}`);
  const axes = [
    ...[-180, -120, -60, 0, 60, 120, 180].map(
      (angle) =>
        `<text x="${round(x(angle))}" y="${HEIGHT - MARGIN.bottom + 20}" text-anchor="middle">${angle}°</text>`,
    ),
    ...ticks.map(
      (tick) =>
        `<line x1="${MARGIN.left}" x2="${WIDTH - MARGIN.right}" y1="${round(y(tick))}" y2="${round(y(tick))}" stroke="#d9d5ca"/>` +
        `<text x="${MARGIN.left - 8}" y="${round(y(tick) + 4)}" text-anchor="end">${tick}</text>`,
    ),
  ];
  const marks = stationary.map(({ kind, angle, relative, label }) => {
    const below = kind === 'minimum';
    return (
      `<circle cx="${round(x(angle))}" cy="${round(y(relative))}" r="4" fill="${below ? '#0b6e6e' : '#b83a24'}"/>` +
      `<text x="${round(Math.min(Math.max(x(angle), MARGIN.left + 30), WIDTH - MARGIN.right - 30))}" y="${round(y(relative) - 10)}" text-anchor="middle" font-size="11">${escapeText(label)}</text>`
    );
  });
  return [
    `<svg xmlns="http://www.w3.org/2000/svg" width="${WIDTH}" height="${HEIGHT}" viewBox="0 0 ${WIDTH} ${HEIGHT}" font-family="Rubik, sans-serif" font-size="13" fill="#16242b">`,
    `<title>${escapeText(title)}</title>`,
    `<rect width="${WIDTH}" height="${HEIGHT}" fill="#ffffff"/>`,
    `<text x="${MARGIN.left}" y="22" font-size="15" font-weight="600">${escapeText(title)}</text>`,
    ...axes,
    `<text x="${(MARGIN.left + WIDTH - MARGIN.right) / 2}" y="${HEIGHT - 14}" text-anchor="middle">Torsion angle / degrees</text>`,
    `<text transform="translate(18 ${(MARGIN.top + HEIGHT - MARGIN.bottom) / 2}) rotate(-90)" text-anchor="middle">Relative energy / ${unit}</text>`,
    `<polyline points="${line.join(' ')}" fill="none" stroke="#0b6e6e" stroke-width="2" stroke-linejoin="round"/>`,
    ...marks,
    '</svg>',
    '',
  ].join('\n');
}
