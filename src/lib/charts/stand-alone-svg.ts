/**
 * A drawing of the page as an image file that stands alone: its colors, fonts and sizes are written into it, so that it
 * looks the same in a paper, a slide or an editor as on the page.
 */
import { plainColor } from './plain-color';

export interface ExportOptions {
  /** Named in the file, for those who hear it or search for it. */
  readonly title: string;
  /** White paper behind the drawing, or none. */
  readonly paper: 'white' | 'transparent';
}

const SVG_NAMESPACE = 'http://www.w3.org/2000/svg';
/** Pixels of a PNG for one of the page: sharp in print at 10 cm across. */
const PNG_SCALE = 3;

/** What of the computed style shapes an SVG drawing, as attributes carry it. */
const SHAPING = [
  'fill',
  'fill-opacity',
  'stroke',
  'stroke-width',
  'stroke-opacity',
  'stop-color',
  'stroke-dasharray',
  'stroke-linecap',
  'stroke-linejoin',
  'opacity',
  'font-family',
  'font-size',
  'font-weight',
  'font-variant-numeric',
  'letter-spacing',
  'text-anchor',
  'dominant-baseline',
  'paint-order',
] as const;
const COLORS = new Set<string>(['fill', 'stroke', 'stop-color']);
const isColor = (name: string, value: string): boolean =>
  COLORS.has(name) && value !== 'none' && !value.startsWith('url(');
/** What an attribute left out means anyway. */
const DEFAULTS: Readonly<Record<string, string>> = {
  'fill-opacity': '1',
  'stroke-opacity': '1',
  'stroke-dasharray': 'none',
  'stroke-linecap': 'butt',
  'stroke-linejoin': 'miter',
  'font-variant-numeric': 'normal',
  'letter-spacing': 'normal',
  'dominant-baseline': 'auto',
  'paint-order': 'normal',
  opacity: '1',
};
/** Marks what belongs to the page only, such as handles and cursors of the pointer. */
export const PAGE_ONLY = 'data-page-only';

/** The drawing as the text of a stand-alone SVG file. In dark colors it is exported in the light ones: paper is white. */
export async function standAloneSvg(
  drawing: SVGSVGElement,
  options: ExportOptions,
): Promise<string> {
  const copy = inLightColors(() => copyWithStyles(drawing));
  const { width, height } = drawing.getBoundingClientRect();
  const box = drawing.getAttribute('viewBox') ?? `0 0 ${width} ${height}`;
  copy.setAttribute('xmlns', SVG_NAMESPACE);
  copy.setAttribute('viewBox', box);
  copy.setAttribute('width', width.toFixed(0));
  copy.setAttribute('height', height.toFixed(0));
  if (options.paper === 'white') copy.prepend(paperSheet(box));
  copy.prepend(withText('style', await embeddedFonts(familiesOf(copy))));
  copy.prepend(withText('title', options.title));
  return new XMLSerializer().serializeToString(copy);
}

/** The drawing as a PNG file. */
export async function pngOf(drawing: SVGSVGElement, options: ExportOptions): Promise<Blob> {
  const { width, height } = drawing.getBoundingClientRect();
  const text = await standAloneSvg(drawing, options);
  const address = URL.createObjectURL(new Blob([text], { type: 'image/svg+xml' }));
  try {
    const image = new Image(width * PNG_SCALE, height * PNG_SCALE);
    image.src = address;
    await image.decode();
    const canvas = document.createElement('canvas');
    canvas.width = Math.round(width * PNG_SCALE);
    canvas.height = Math.round(height * PNG_SCALE);
    canvas.getContext('2d')!.drawImage(image, 0, 0, canvas.width, canvas.height);
    return await new Promise<Blob>((resolve, reject) =>
      canvas.toBlob((blob) => (blob ? resolve(blob) : reject(new Error('no PNG'))), 'image/png'),
    );
  } finally {
    URL.revokeObjectURL(address);
  }
}

/** Hands a file to the person. */
export function saveFile(content: Blob, name: string): void {
  const link = document.createElement('a');
  link.href = URL.createObjectURL(content);
  link.download = name;
  link.click();
  // The browser takes the address over when the click is done.
  setTimeout(() => URL.revokeObjectURL(link.href));
}

/** The page's colors follow one attribute; nothing is painted between setting and taking it back. */
function inLightColors<T>(work: () => T): T {
  const root = document.documentElement;
  root.dataset['scheme'] = 'light';
  try {
    return work();
  } finally {
    delete root.dataset['scheme'];
  }
}

function copyWithStyles(drawing: SVGSVGElement): SVGSVGElement {
  const copy = drawing.cloneNode(true) as SVGSVGElement;
  const originals = [drawing, ...drawing.querySelectorAll('*')];
  const copies = [copy, ...copy.querySelectorAll('*')];
  originals.forEach((original, n) => inlineStyle(original, copies[n]));
  for (const element of copy.querySelectorAll(`[${PAGE_ONLY}], title, desc`)) element.remove();
  for (const attribute of ['class', 'style', 'role', 'tabindex', 'id']) {
    copy.removeAttribute(attribute);
  }
  return copy;
}

function inlineStyle(original: Element, copy: Element): void {
  const style = getComputedStyle(original);
  if (style.display === 'none' || style.visibility === 'hidden') {
    copy.setAttribute(PAGE_ONLY, '');
    return;
  }
  for (const name of SHAPING) {
    const value = style.getPropertyValue(name);
    if (value === '' || value === DEFAULTS[name]) copy.removeAttribute(name);
    else copy.setAttribute(name, isColor(name, value) ? plainColor(value) : value);
  }
  // Inside a drawing a further one cuts off what stands over its edge, unless told otherwise.
  if (original instanceof SVGSVGElement) copy.setAttribute('overflow', style.overflow);
  copy.removeAttribute('class');
  copy.removeAttribute('style');
  for (const { name } of [...copy.attributes]) {
    if (name.startsWith('aria-') || name.startsWith('data-svelte')) copy.removeAttribute(name);
  }
}

function paperSheet(box: string): SVGElement {
  const [x, y, width, height] = box.split(/[ ,]+/);
  const sheet = document.createElementNS(SVG_NAMESPACE, 'rect');
  Object.entries({ x, y, width, height, fill: '#ffffff' }).forEach(([name, value]) =>
    sheet.setAttribute(name, value),
  );
  return sheet;
}

function withText(name: 'style' | 'title', text: string): SVGElement {
  const element = document.createElementNS(SVG_NAMESPACE, name);
  element.textContent = text;
  return element;
}

function familiesOf(drawing: Element): Set<string> {
  const families = new Set<string>();
  for (const text of drawing.querySelectorAll('text')) {
    const [first] = (text.getAttribute('font-family') ?? '').split(',');
    if (first) families.add(first.trim().replaceAll(/["']/g, ''));
  }
  return families;
}

/** The page's own font faces of these families that cover Latin text, each with its file inside. */
async function embeddedFonts(families: ReadonlySet<string>): Promise<string> {
  const faces = [...document.styleSheets].flatMap((sheet) =>
    [...sheet.cssRules].flatMap((rule) => {
      if (!(rule instanceof CSSFontFaceRule)) return [];
      const family = rule.style.getPropertyValue('font-family').replaceAll(/["']/g, '');
      const isUsed =
        families.has(family) && coversLatin(rule.style.getPropertyValue('unicode-range'));
      const source = /url\(["']?([^"')]+)/.exec(rule.style.getPropertyValue('src'))?.[1];
      if (!isUsed || source === undefined || rule.style.fontStyle === 'italic') return [];
      return [{ family, source: new URL(source, sheet.href ?? document.baseURI).href }];
    }),
  );
  const texts = await Promise.all(
    faces.map(async ({ family, source }) => {
      const response = await fetch(source);
      const data = await asDataUrl(await response.blob());
      return `@font-face{font-family:"${family}";font-weight:300 900;src:url(${data}) format("woff2");}`;
    }),
  );
  return texts.join('\n');
}

const coversLatin = (range: string): boolean =>
  range === '' || /U\+0{0,4}-|U\+00(?:00)?-/i.test(range);

function asDataUrl(blob: Blob): Promise<string> {
  return new Promise((resolve, reject) => {
    const reader = new FileReader();
    reader.onload = () => resolve(reader.result as string);
    reader.onerror = () => reject(reader.error ?? new Error('a font could not be read'));
    reader.readAsDataURL(blob);
  });
}
