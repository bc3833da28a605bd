/** What may be asked of the computation: one molecule and one task, with defaults, bounds and messages for people. */
import { z } from 'zod';

/** A number within bounds, and one sentence for everything that can be wrong with it. */
function bounded(name: string, least: number, most: number, unit = ''): z.ZodNumber {
  const error = `${name} must be a number from ${least} to ${most}${unit}.`;
  return z.number({ error }).min(least, { error }).max(most, { error });
}

/** A whole number within bounds. */
function whole(name: string, least: number, most: number): z.ZodNumber {
  const error = `${name} must be a whole number from ${least} to ${most}.`;
  return z.number({ error }).int({ error }).min(least, { error }).max(most, { error });
}

function oneOf<const Names extends readonly [string, ...string[]]>(name: string, names: Names) {
  return z.enum(names, { error: `${name} must be one of: ${names.join(', ')}.` });
}

function yesOrNo(name: string): z.ZodBoolean {
  return z.boolean({ error: `${name} must be true or false.` });
}

/** An object without unknown fields: a misspelled setting would otherwise be a silent default. */
function exactly<Shape extends z.core.$ZodLooseShape>(name: string, shape: Shape) {
  return z.strictObject(shape, {
    error: (issue) =>
      issue.code === 'unrecognized_keys'
        ? `${name} has no field ${issue.keys.map((key) => `"${key}"`).join(', ')}; it may have: ${Object.keys(shape).join(', ')}.`
        : `${name} must be an object.`,
  });
}

/** Longest molecule text that is read, characters. */
export const MOLECULE_TEXT_LIMIT = 1_000_000;

const moleculeText = z.string().max(MOLECULE_TEXT_LIMIT);

/** The molecule as SMILES or as a MOL/SDF record. */
export const moleculeSchema = z.union(
  [
    exactly('The molecule', { smiles: moleculeText }),
    exactly('The molecule', { molfile: moleculeText }),
  ],
  {
    error: `The molecule must be {"smiles": "…"} or {"molfile": "…"}, with at most ${MOLECULE_TEXT_LIMIT} characters.`,
  },
);

const variant = oneOf('The variant', ['MMFF94s', 'MMFF94']).default('MMFF94s');

/** The dielectric constant, or constant times distance; the defaults differ by task. */
function dielectric(constant: number, distanceDependent: boolean) {
  return exactly('The dielectric', {
    constant: bounded('The dielectric constant', 1, 100).default(constant),
    distanceDependent: yesOrNo('"distanceDependent"').default(distanceDependent),
  }).prefault({});
}

const model = { variant, dielectric: dielectric(1, false) };
const seed = whole('The seed', 0, 4_294_967_295).default(1);
const temperature = bounded('The temperature', 10, 3000, ' K').default(298.15);

const atom = whole('An atom index', 0, 9999);
const torsionError = 'The torsion must be four different atom indices [i, j, k, l].';
const torsion = z
  .tuple([atom, atom, atom, atom], { error: torsionError })
  .refine((atoms) => new Set(atoms).size === 4, { error: torsionError });
const bondError = 'The bond must be two different atom indices [j, k].';
const bond = z
  .tuple([atom, atom], { error: bondError })
  .refine(([j, k]) => j !== k, { error: bondError });

/** A step of a grid over the circle, degrees. */
function step(least: number, usual: number) {
  const error = `The step must divide 360 degrees evenly and lie between ${least} and 120 degrees.`;
  return z
    .number({ error })
    .min(least, { error })
    .max(120, { error })
    .refine((degrees) => Math.abs(360 / degrees - Math.round(360 / degrees)) < 1e-9, { error })
    .default(usual);
}

export const energyTaskSchema = exactly('An energy task', {
  kind: z.literal('energy'),
  ...model,
});

export const minimizeTaskSchema = exactly('A minimize task', {
  kind: z.literal('minimize'),
  ...model,
});

export const conformersTaskSchema = exactly('A conformers task', {
  kind: z.literal('conformers'),
  ...model,
  limit: whole('The limit', 1, 1000).default(50),
  window: bounded('The window', 0, 100, ' kcal/mol').default(10),
  temperature,
  seed,
  effort: oneOf('The effort', ['quick', 'normal', 'thorough']).default('normal'),
});

/** The settings of a scan, whichever bond it turns. */
export const scanSettings = {
  ...model,
  step: step(1, 15),
  relaxed: yesOrNo('"relaxed"').default(true),
  temperature,
  seed,
};

export const scanTaskSchema = exactly('A scan task', {
  kind: z.literal('scan'),
  torsion: torsion.optional(),
  bond: bond.optional(),
  ...scanSettings,
}).refine((task) => (task.torsion === undefined) !== (task.bond === undefined), {
  error: 'A scan task needs either "torsion" [i, j, k, l] or "bond" [j, k].',
});

const mapError = 'A map task needs "torsions": two torsions [i, j, k, l] about different bonds.';

/** The settings of a map, whichever bonds it turns. */
export const mapSettings = { ...model, step: step(5, 30), seed };

export const mapTaskSchema = exactly('A map task', {
  kind: z.literal('map'),
  ...mapSettings,
  torsions: z
    .tuple([torsion, torsion], { error: mapError })
    .refine(([[, a, b], [, c, d]]) => !((a === c && b === d) || (a === d && b === c)), {
      error: mapError,
    }),
});

export const conjugationTaskSchema = exactly('A conjugation task', {
  kind: z.literal('conjugation'),
  ...model,
  temperature,
  seed,
});

export const strainTaskSchema = exactly('A strain task', {
  kind: z.literal('strain'),
  variant,
  // Screened by distance: in vacuum the lowest conformer of a charged ligand is collapsed on its own charges.
  dielectric: dielectric(4, true),
  tether: bounded('The tether', 0, 2, ' Å').default(0.3),
  seed,
});

export const taskSchema = z.discriminatedUnion(
  'kind',
  [
    energyTaskSchema,
    minimizeTaskSchema,
    conformersTaskSchema,
    scanTaskSchema,
    mapTaskSchema,
    conjugationTaskSchema,
    strainTaskSchema,
  ],
  {
    error:
      'The task must be an object whose "kind" is one of: energy, minimize, conformers, scan, map, conjugation, strain.',
  },
);

/** One request, as a person or program writes it; parsing fills the defaults in. */
export const computeRequestSchema = exactly('A request', {
  molecule: moleculeSchema,
  task: taskSchema,
});

/** A request before parsing: settings may be left out. */
export type ComputeRequestInput = z.input<typeof computeRequestSchema>;
/** A request with every default filled in. */
export type ComputeRequest = z.output<typeof computeRequestSchema>;
export type ComputeTask = ComputeRequest['task'];
export type ComputeTaskKind = ComputeTask['kind'];

/** What is wrong with a request, for people: the place and a sentence each, at most three. */
export function describeRequestError(error: z.ZodError): string {
  const sentences = error.issues.map(({ path, message }) =>
    path.length > 0 ? `${path.join('.')}: ${message}` : message,
  );
  const shown = [...new Set(sentences)].slice(0, 3);
  return shown.join(' ');
}
