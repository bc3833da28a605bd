/** From a plan to tasks: which computations one row of a batch needs. */
import type { ChosenBonds, Plan, Rotor } from '../domain/submission';
import type { ProgramTaskKind } from '../domain/second-opinions';
import type { tasks } from './db/schema';

export interface PlannedTask {
  readonly entryId: string;
  readonly moleculeId: string;
  readonly kind: Exclude<(typeof tasks.$inferSelect)['kind'], ProgramTaskKind>;
  /** As the task schemas of the domain have them, without the kind. */
  readonly settings: Record<string, unknown>;
}

export interface PlannedRow {
  readonly id: string;
  readonly moleculeId: string;
  readonly rotors: readonly Rotor[];
  readonly hasGeometry: boolean;
  readonly chosenBonds: unknown;
  readonly mapBonds: unknown;
}

/** The tasks of one row: one a kind, but one a bond for scans, and a map only where two bonds were chosen. What a molecule has no use for is left out. */
export function planTasks(row: PlannedRow, plan: Plan): PlannedTask[] {
  const own = { entryId: row.id, moleculeId: row.moleculeId };
  const planned: PlannedTask[] = [];
  if (plan.conformers) planned.push({ ...own, kind: 'conformers', settings: plan.conformers });
  if (plan.scans) {
    const { bonds, terminal, ...settings } = plan.scans;
    for (const { torsion } of scannedRotors(row, bonds, terminal)) {
      planned.push({ ...own, kind: 'scan', settings: { torsion, ...settings } });
    }
  }
  if (plan.maps) {
    const torsions = mappedTorsions(row);
    if (torsions) planned.push({ ...own, kind: 'map', settings: { torsions, ...plan.maps } });
  }
  if (plan.conjugation && row.rotors.some((rotor) => rotor.conjugated)) {
    planned.push({ ...own, kind: 'conjugation', settings: plan.conjugation });
  }
  if (plan.strain && row.hasGeometry) {
    planned.push({ ...own, kind: 'strain', settings: plan.strain });
  }
  return planned;
}

function scannedRotors(
  row: PlannedRow,
  bonds: NonNullable<Plan['scans']>['bonds'],
  terminal: boolean,
): Rotor[] {
  if (bonds === 'chosen') {
    const chosen = row.chosenBonds as ChosenBonds;
    return row.rotors.filter((rotor) => chosen.some((bond) => turns(rotor, bond)));
  }
  return row.rotors.filter(
    (rotor) => (terminal || !rotor.terminal) && (bonds === 'rotatable' || rotor.conjugated),
  );
}

/** The torsions of the two bonds chosen for a row's map; null where none were. */
function mappedTorsions({ rotors, mapBonds }: PlannedRow): Rotor['torsion'][] | null {
  const torsions = (mapBonds as ChosenBonds).flatMap((bond) => {
    const rotor = rotors.find((each) => turns(each, bond));
    return rotor ? [rotor.torsion] : [];
  });
  return torsions.length === 2 ? torsions : null;
}

function turns({ torsion: [, j, k] }: Rotor, [a, b]: ChosenBonds[number]): boolean {
  return (a === j && b === k) || (a === k && b === j);
}
