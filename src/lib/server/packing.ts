/** Geometries as they are stored: little-endian float64, 3 numbers an atom, Å. */

/** Packs coordinates of one geometry, or of several one after the other. */
export function pack(geometries: readonly Float64Array[]): Uint8Array {
  const bytes = new Uint8Array(8 * geometries.reduce((total, { length }) => total + length, 0));
  const view = new DataView(bytes.buffer);
  let at = 0;
  for (const geometry of geometries) {
    for (const value of geometry) {
      view.setFloat64(at, value, true);
      at += 8;
    }
  }
  return bytes;
}

/** Unpacks geometries of `atomCount` atoms each. */
export function unpack(bytes: Uint8Array, atomCount: number): Float64Array[] {
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  const size = 3 * atomCount;
  return Array.from({ length: bytes.byteLength / 8 / size }, (_, geometry) =>
    Float64Array.from({ length: size }, (_value, n) =>
      view.getFloat64(8 * (geometry * size + n), true),
    ),
  );
}
