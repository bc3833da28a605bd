/** What things are called on pages, in letters and in bundles. */

const kindNames = {
  conformers: 'Conformers',
  scan: 'Torsion scan',
  map: 'Map of two bonds',
  conjugation: 'Conjugation',
  strain: 'Strain',
  opinion: 'Second opinion',
  ranking: 'Conformers ranked again',
  heat: 'Heat of formation',
} as const;

export type TaskKind = keyof typeof kindNames;

/** What can be computed. */
export const taskKinds = Object.keys(kindNames) as [TaskKind, ...TaskKind[]];

/** The kind of a task, as people call it. */
export function taskKindName(kind: TaskKind): string {
  return kindNames[kind];
}
