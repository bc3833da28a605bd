/** QR codes as SVG, drawn in the page's own ink on white paper: cameras need dark on light in either scheme. */
import { encode } from 'uqr';

/** The path and size of a code, one unit a module, with the quiet zone of four modules around it. */
export function drawQrCode(text: string): { readonly path: string; readonly size: number } {
  const { data, size } = encode(text, { ecc: 'M', border: 4 });
  const modules = data.flatMap((row, y) =>
    row.flatMap((isDark, x) => (isDark ? [`M${x} ${y}h1v1h-1z`] : [])),
  );
  return { path: modules.join(''), size };
}
