/**
 * Colors of the energy scale: tide at the bottom, brass in the middle, ember at the top, evenly changing in lightness
 * (OKLab, B. Ottosson 2020), so that the order survives without hue. They only go beside a number.
 */

type Triple = readonly [number, number, number];

/** On light paper the scale darkens upward, on dark paper it brightens; either way the bottom recedes into the paper. */
const STOPS = {
  light: ['#bfe0dc', '#d9a24f', '#b83a24'],
  dark: ['#1d5152', '#b0792a', '#f3a08c'],
} as const;
export type Scheme = keyof typeof STOPS;

/** The color at a share of the scale, 0 to 1; what lies outside is taken for its end. */
export function energyColor(share: number, scheme: Scheme): string {
  const place = 2 * Math.min(1, Math.max(0, share));
  const stop = Math.min(1, Math.floor(place));
  const [from, to] = [toOklab(STOPS[scheme][stop]), toOklab(STOPS[scheme][stop + 1])];
  const mix = (axis: 0 | 1 | 2): number => from[axis] + (place - stop) * (to[axis] - from[axis]);
  return fromOklab([mix(0), mix(1), mix(2)]);
}

/** The color as CSS that follows the page's scheme. */
export function energyPaint(share: number): string {
  return `light-dark(${energyColor(share, 'light')}, ${energyColor(share, 'dark')})`;
}

/** Lightness of a color, 0 to 1. */
export function lightness(hex: string): number {
  return toOklab(hex)[0];
}

function toOklab(hex: string): Triple {
  const [r, g, b] = [1, 3, 5].map((at) => {
    const value = Number.parseInt(hex.slice(at, at + 2), 16) / 255;
    return value <= 0.04045 ? value / 12.92 : ((value + 0.055) / 1.055) ** 2.4;
  });
  const l = Math.cbrt(0.4122214708 * r + 0.5363325363 * g + 0.0514459929 * b);
  const m = Math.cbrt(0.2119034982 * r + 0.6806995451 * g + 0.1073969566 * b);
  const s = Math.cbrt(0.0883024619 * r + 0.2817188376 * g + 0.6299787005 * b);
  return [
    0.2104542553 * l + 0.793617785 * m - 0.0040720468 * s,
    1.9779984951 * l - 2.428592205 * m + 0.4505937099 * s,
    0.0259040371 * l + 0.7827717662 * m - 0.808675766 * s,
  ];
}

function fromOklab([lightnessValue, a, b]: Triple): string {
  const l = (lightnessValue + 0.3963377774 * a + 0.2158037573 * b) ** 3;
  const m = (lightnessValue - 0.1055613458 * a - 0.0638541728 * b) ** 3;
  const s = (lightnessValue - 0.0894841775 * a - 1.291485548 * b) ** 3;
  const linear = [
    4.0767416621 * l - 3.3077115913 * m + 0.2309699292 * s,
    -1.2684380046 * l + 2.6097574011 * m - 0.3413193965 * s,
    -0.0041960863 * l - 0.7034186147 * m + 1.707614701 * s,
  ];
  const bytes = linear.map((value) => {
    const clipped = Math.min(1, Math.max(0, value));
    const encoded = clipped <= 0.0031308 ? 12.92 * clipped : 1.055 * clipped ** (1 / 2.4) - 0.055;
    return Math.round(255 * encoded)
      .toString(16)
      .padStart(2, '0');
  });
  return `#${bytes.join('')}`;
}
