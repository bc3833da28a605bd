/** Rewrites V2000 molfiles for the tests. */

/** The same molecule with atom `order[n]` of the old numbering as atom n of the new one (V2000; charges and isotopes kept). */
export function renumberMolfile(molfile: string, order: readonly number[]): string {
  const lines = molfile.split('\n');
  const atomCount = Number(lines[3].slice(0, 3));
  const bondCount = Number(lines[3].slice(3, 6));
  const place = new Int32Array(atomCount);
  order.forEach((old, now) => (place[old] = now));
  const renamed = (field: string): string => String(place[Number(field) - 1] + 1).padStart(3);
  const atoms = order.map((old) => lines[4 + old]);
  const bonds = lines
    .slice(4 + atomCount, 4 + atomCount + bondCount)
    .map((line) => renamed(line.slice(0, 3)) + renamed(line.slice(3, 6)) + line.slice(6));
  const properties = lines
    .slice(4 + atomCount + bondCount)
    .map((line) =>
      /^M {2}(CHG|ISO|RAD)/.test(line)
        ? line.slice(0, 9) +
          line
            .slice(9)
            .replace(
              / {1,3}(\d+) ( {0,2}-?\d+)/g,
              (_, atom: string, value: string) => ` ${renamed(atom)} ${value}`,
            )
        : line,
    );
  return [...lines.slice(0, 4), ...atoms, ...bonds, ...properties].join('\n');
}
