/** Colors as every program reads them: variables and mixtures in wide color spaces become plain red, green and blue. */
const known = new Map<string, string>();
let context: CanvasRenderingContext2D | null = null;

/** A computed CSS color as `rgb(…)` or `rgba(…)`; browser only. */
export function plainColor(color: string): string {
  const found = known.get(color);
  if (found !== undefined) return found;
  const [red, green, blue, alpha] = paint(color);
  const plain =
    alpha === 255
      ? `rgb(${red}, ${green}, ${blue})`
      : `rgba(${red}, ${green}, ${blue}, ${(alpha / 255).toFixed(3)})`;
  known.set(color, plain);
  return plain;
}

function paint(color: string): Uint8ClampedArray {
  if (context === null) {
    const canvas = document.createElement('canvas');
    canvas.width = canvas.height = 1;
    context = canvas.getContext('2d', { willReadFrequently: true })!;
  }
  context.clearRect(0, 0, 1, 1);
  context.fillStyle = color;
  context.fillRect(0, 0, 1, 1);
  return context.getImageData(0, 0, 1, 1).data;
}
