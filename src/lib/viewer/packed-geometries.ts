/** Fetches the geometries of a scan, once, as packed numbers. */
const asked = new Map<string, Promise<readonly Float64Array[]>>();

/**
 * The geometries of a scan's points, then those of its stationary points; Å, 3N each. Rejects when they could not be had,
 * and the next call tries again.
 */
export function fetchPackedGeometries(
  moleculeId: string,
  resultId: string,
  atomCount: number,
): Promise<readonly Float64Array[]> {
  const address = `/molecules/${moleculeId}/geometries/${resultId}/packed`;
  const known = asked.get(address);
  if (known) return known;
  const answer = fetch(address).then(async (response) => {
    if (!response.ok) throw new Error(`geometries: ${response.status}`);
    return unpack(await response.arrayBuffer(), atomCount);
  });
  answer.catch(() => asked.delete(address));
  asked.set(address, answer);
  return answer;
}

/** Little-endian float32, 3 numbers an atom. */
export function unpack(bytes: ArrayBuffer, atomCount: number): Float64Array[] {
  const view = new DataView(bytes);
  const size = 3 * atomCount;
  return Array.from({ length: bytes.byteLength / 4 / size }, (_, frame) =>
    Float64Array.from({ length: size }, (_value, n) =>
      view.getFloat32(4 * (frame * size + n), true),
    ),
  );
}
