/** What a person submits: how rows are read, and what is run for each molecule. The same schemas serve page and server. */
import { z } from 'zod';
import {
  conformersTaskSchema,
  conjugationTaskSchema,
  mapSettings,
  scanSettings,
  strainTaskSchema,
} from './compute';

/** Most rows of one upload. */
export const ROW_LIMIT = 20_000;
/** Largest upload, bytes. */
export const UPLOAD_LIMIT = 50 * 1024 * 1024;
/** Most stereoisomers that one row with undefined stereocentres is expanded to. */
export const STEREO_LIMIT = 16;

/** How rows become molecules; everything is off unless asked for, because each changes what was given. */
export const readingSchema = z.strictObject({
  /** Keep the largest part of a mixture; a row that is a mixture is an error otherwise. */
  stripSalts: z.boolean().default(false),
  /** Keep only the first of rows that are the same molecule. */
  mergeDuplicates: z.boolean().default(false),
  /** Replace a row with undefined stereocentres by its stereoisomers, at most this many; 0 leaves it as it is. */
  expandStereo: z.number().int().min(0).max(STEREO_LIMIT).default(0),
});
export type Reading = z.output<typeof readingSchema>;

/** The formats that are taken, by the ending of a file's name. */
export const formats = ['smi', 'csv', 'sdf', 'mol'] as const;
export type Format = (typeof formats)[number];

/** How molecules come in. */
export const sources = ['paste', 'draw', 'upload'] as const;

/** What goes with an upload, in the address; the upload itself is the body. */
export const draftQuerySchema = z.object({
  name: z
    .string()
    .trim()
    .min(1, { error: 'Give the batch a name.' })
    .max(120, { error: 'The name may have at most 120 characters.' }),
  source: z.enum(sources),
  format: z.enum(formats, {
    error: `Files end in .${formats.join(', .')}; this one has another ending.`,
  }),
  reading: z
    .string()
    .default('{}')
    .transform((text, context) => {
      try {
        return readingSchema.parse(JSON.parse(text));
      } catch {
        context.addIssue({ code: 'custom', message: 'The reading options are wrong.' });
        return z.NEVER;
      }
    }),
});

/** What is told while an upload is read, and at its end. */
export type ReadingNews =
  | { readonly rows: number; readonly errors: number }
  | { readonly draftId: string }
  | { readonly fault: string };

/** Which bonds are scanned: by rule, or those clicked on the drawing of each row. */
export const bondChoices = ['rotatable', 'conjugated', 'chosen'] as const;
export type BondChoice = (typeof bondChoices)[number];

const scansSchema = z.strictObject({
  bonds: z.enum(bondChoices).default('rotatable'),
  /** Whether methyl, hydroxyl and the like are turned too. */
  terminal: z.boolean().default(false),
  ...scanSettings,
});

/** A finer map takes hours, and tells no more. */
const FINEST_MAP = 10;

/** A map turns the two bonds clicked on the drawing of each row. */
const mapsSchema = z.strictObject({
  ...mapSettings,
  step: mapSettings.step.refine((degrees) => degrees >= FINEST_MAP, {
    error: `The step of a map is at least ${FINEST_MAP} degrees.`,
  }),
});

/** What is run for every molecule of a batch; at least one kind of task. */
export const planSchema = z
  .strictObject({
    conformers: conformersTaskSchema.omit({ kind: true }).nullable().default(null),
    scans: scansSchema.nullable().default(null),
    maps: mapsSchema.nullable().default(null),
    conjugation: conjugationTaskSchema.omit({ kind: true }).nullable().default(null),
    strain: strainTaskSchema.omit({ kind: true }).nullable().default(null),
  })
  .refine((plan) => Object.values(plan).some((part) => part !== null), {
    error: 'Choose at least one thing to compute.',
  });
export type Plan = z.output<typeof planSchema>;

const clickedBond = z.tuple([z.number().int().min(0), z.number().int().min(0)]);

/** The bonds clicked on one row's drawing for scans, each as its two atoms counted from 0. */
export const chosenBondsSchema = z.array(clickedBond).max(50);
export type ChosenBonds = z.output<typeof chosenBondsSchema>;

/** The two bonds clicked on one row's drawing for its map, or none. */
export const mapBondsSchema = z
  .array(clickedBond)
  .refine((bonds) => bonds.length === 0 || bonds.length === 2, {
    error: 'A map turns two bonds.',
  });

/** The choice of bonds of one row: what it is for, and the bonds. */
export const bondChoiceSchema = z.discriminatedUnion('purpose', [
  z.object({ purpose: z.literal('scan'), bonds: chosenBondsSchema }),
  z.object({ purpose: z.literal('map'), bonds: mapBondsSchema }),
]);
export type RowBondChoice = z.output<typeof bondChoiceSchema>;

/** A remark on a row: a warning, or the reason why it cannot be computed. */
export const remarkSchema = z.object({
  code: z.string(),
  message: z.string(),
  line: z.number().int().optional(),
  atom: z.number().int().optional(),
});
export type Remark = z.output<typeof remarkSchema>;

/** A bond that can be scanned, with its reference torsion; atoms are counted from 0. */
export interface Rotor {
  readonly torsion: readonly [number, number, number, number];
  readonly conjugated: boolean;
  /** Only hydrogens at one end: methyl, hydroxyl and the like. */
  readonly terminal: boolean;
}
