/** Second opinions: what may be asked of the external programs, and what their models are called. */
import { z } from 'zod';

/** The external programs, and what each is for. */
export const programs = {
  xtb: { name: 'xtb', use: 'second opinions on turns and on the order of conformers' },
  mopac: { name: 'mopac', use: 'heats of formation by PM7' },
} as const;
export type ProgramName = keyof typeof programs;
export const programNames = ['xtb', 'mopac'] as const satisfies readonly ProgramName[];
/** Versions of the programs that are there, by name. */
export type InstalledVersions = Partial<Record<ProgramName, string>>;

export const GFN2 = 'GFN2-xTB';
export const GFN1 = 'GFN1-xTB';
export const PM7 = 'PM7';

/** Energies on the geometries of the scan, or geometries relaxed by GFN2-xTB with the torsion held. */
export const opinionDepths = ['quick', 'relaxed'] as const;
export type OpinionDepth = (typeof opinionDepths)[number];

/** A second opinion on a stored scan. */
export const opinionSettingsSchema = z.strictObject({
  /** The result that holds the scan. */
  result: z.uuid({ error: 'Name the result of a torsion scan.' }),
  depth: z.enum(opinionDepths, { error: 'The depth must be one of: quick, relaxed.' }),
});
export type OpinionSettings = z.output<typeof opinionSettingsSchema>;

/** Energies of the conformers as they are, or each relaxed by GFN2-xTB. */
export const rankingDepths = ['energies', 'optimized'] as const;
export type RankingDepth = (typeof rankingDepths)[number];

/** Most conformers that are ranked again. */
export const RANKING_LIMIT = 100;

/** A second opinion on the order of stored conformers. */
export const rankingSettingsSchema = z.strictObject({
  /** The result that holds the conformers. */
  result: z.uuid({ error: 'Name the result of a conformer search.' }),
  depth: z.enum(rankingDepths, { error: 'The depth must be one of: energies, optimized.' }),
  /** Conformers up to here above the lowest are ranked again, kcal/mol. */
  window: z.coerce
    .number({ error: 'The window must be a number from 0.1 to 20 kcal/mol.' })
    .min(0.1, { error: 'The window must be a number from 0.1 to 20 kcal/mol.' })
    .max(20, { error: 'The window must be a number from 0.1 to 20 kcal/mol.' })
    .default(6),
});
export type RankingSettings = z.output<typeof rankingSettingsSchema>;

/** A heat of formation: the lowest conformers by MMFF94s, each relaxed by PM7. */
export const heatSettingsSchema = z.strictObject({
  /** How many of the lowest conformers PM7 relaxes. */
  conformers: z.coerce.number().int().min(1).max(20).default(5),
  seed: z.coerce.number().int().min(0).default(1),
});
export type HeatSettings = z.output<typeof heatSettingsSchema>;

/** The tasks that external programs perform, and which program each needs. */
export const programOfKind = { opinion: 'xtb', ranking: 'xtb', heat: 'mopac' } as const;
export type ProgramTaskKind = keyof typeof programOfKind;
export const programTaskKinds = Object.keys(programOfKind) as readonly ProgramTaskKind[];

/** True for tasks that an external program performs. */
export function needsProgram(kind: string): kind is ProgramTaskKind {
  return kind in programOfKind;
}

/** The program that performs tasks of a kind; undefined for the engine's own. */
export function programFor(kind: string): ProgramName | undefined {
  return needsProgram(kind) ? programOfKind[kind] : undefined;
}

/** How to add a program that no worker has. */
export function howToAdd(program: ProgramName): string {
  return `No worker has the program ${program}. Whoever runs Windlass can add it with “apt-get install ${program}” on a worker’s machine, and start the worker again.`;
}
