/** What things are called on pages, in letters and in bundles. */

const taskKinds = {
  conformers: 'Conformers',
  scan: 'Torsion scan',
  map: 'Map of two bonds',
  conjugation: 'Conjugation',
  strain: 'Strain',
  opinion: 'Second opinion',
  ranking: 'Conformers ranked again',
  heat: 'Heat of formation',
} as const;

/** The kind of a task, as people call it. */
export function taskKindName(kind: keyof typeof taskKinds): string {
  return taskKinds[kind];
}
