/** Geometries as the programs read and write them: strict, so that nothing half-written passes for an answer. */

/** Å in the XYZ format, every digit that matters. */
export function writeXyz(symbols: readonly string[], coordinates: Float64Array): string {
  const lines = symbols.map(
    (symbol, atom) =>
      `${symbol} ${[0, 1, 2].map((axis) => coordinates[3 * atom + axis].toFixed(10)).join(' ')}`,
  );
  return `${symbols.length}\n\n${lines.join('\n')}\n`;
}

/** The coordinates of an XYZ file with exactly these atoms in this order; null for anything else. */
export function readXyz(symbols: readonly string[], text: string): Float64Array | null {
  const lines = text.trimEnd().split('\n');
  if (Number(lines[0]) !== symbols.length || lines.length !== symbols.length + 2) return null;
  const coordinates = new Float64Array(3 * symbols.length);
  for (const [atom, symbol] of symbols.entries()) {
    const [found, ...values] = lines[atom + 2].trim().split(/\s+/);
    if (found !== symbol || values.length !== 3) return null;
    for (const [axis, value] of values.entries()) coordinates[3 * atom + axis] = Number(value);
  }
  return coordinates.every(Number.isFinite) ? coordinates : null;
}
