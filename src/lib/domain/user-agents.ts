/** Says in words which browser a sign-in came from, as far as its header tells. */

/** In order: many programs also name those they descend from. */
const browsers: readonly (readonly [RegExp, string])[] = [
  [/\bEdg(e|A|iOS)?\//, 'Edge'],
  [/\bOPR\//, 'Opera'],
  [/\b(Firefox|FxiOS)\//, 'Firefox'],
  [/\bHeadlessChrome\//, 'Chromium without a window'],
  [/\b(Chrome|CriOS)\//, 'Chrome'],
  [/\bVersion\/[\d.]+.*\bSafari\//, 'Safari'],
  [/^curl\//, 'curl'],
];
const systems: readonly (readonly [RegExp, string])[] = [
  [/\bAndroid\b/, 'Android'],
  [/\b(iPhone|iPad)\b/, 'iOS'],
  [/\bWindows\b/, 'Windows'],
  [/\bMac OS X\b/, 'macOS'],
  [/\bCrOS\b/, 'ChromeOS'],
  [/\bLinux\b/, 'Linux'],
];

const findName = (names: typeof browsers, text: string) =>
  names.find(([pattern]) => pattern.test(text))?.[1];

/** Like "Firefox on Linux". */
export function describeUserAgent(userAgent: string): string {
  const browser = findName(browsers, userAgent) ?? 'An unknown program';
  const system = findName(systems, userAgent);
  return system ? `${browser} on ${system}` : browser;
}
