/** The JSON files of a bundle, described by a schema that goes with them. */
import { z } from 'zod';
import { taskKinds } from './labels';

const coordinates = z
  .array(z.number())
  .describe('x, y, z of every atom in the order of the molfile, Å');
const kcal = (what: string) => z.number().describe(`${what}, kcal/mol`);

const vibrations = z
  .object({
    modes: z
      .object({
        frequencies: z
          .array(z.number())
          .readonly()
          .describe('cm⁻¹, ascending, unscaled; imaginary ones negative'),
        moments: z.array(z.number()).readonly().describe('Principal moments of inertia, g/mol Å²'),
        mass: z.number().describe('g/mol'),
      })
      .nullable()
      .describe('null where none were computed'),
    flaw: z.string().nullable().describe('Why there is no free energy; null where there is one'),
    rise: kcal('How far the saddle lies above the top of the profile').optional(),
  })
  .describe('Harmonic vibrations, on which free energies rest');

export const answerSchema = z.looseObject({
  name: z.string(),
  smiles: z.string().describe('Canonical isomeric SMILES'),
  kind: z.enum(taskKinds),
  settings: z.record(z.string(), z.unknown()).describe('The settings, defaults and seed included'),
  engineVersion: z.string(),
  model: z.string().describe('Energy model'),
  molfile: z.string().describe('V2000; the prepared molecule in its final atom order'),
  details: z
    .record(z.string(), z.unknown())
    .describe(
      'What has no table of its own; atoms counted from 0, angles in degrees, energies in kcal/mol',
    ),
  warnings: z.array(z.looseObject({ code: z.string(), message: z.string() })),
  seconds: z.number().describe('Time the computation took, s'),
  conformers: z.array(
    z.object({
      rank: z.number().int().describe('0 is the lowest'),
      energy: kcal('Model energy'),
      relative: kcal('Energy above the lowest conformer'),
      degeneracy: z.number().int(),
      population: z.number().describe('Share of the set, 0 to 1'),
      rmsdToLowest: z.number().describe('Å'),
      vibrations: vibrations.nullable().describe('null in results of versions before 0.3'),
      coordinates,
    }),
  ),
  profiles: z.array(
    z.object({
      torsion: z.array(z.number().int()).describe('The four atoms, counted from 0'),
      model: z.string(),
      relaxed: z.boolean(),
      points: z.array(
        z.object({
          angle: z.number().describe('Target, degrees'),
          energy: kcal('Model energy without the restraint'),
          relative: kcal('Energy above the lowest of all points'),
          reached: z.number().describe('Angle of the geometry, degrees'),
          coordinates,
        }),
      ),
      stationary: z.array(
        z.looseObject({
          kind: z.enum(['minimum', 'maximum']),
          angle: z.number().describe('Degrees'),
          energy: kcal('Model energy'),
          relative: kcal('Energy above the lowest of all points'),
          label: z.string(),
          vibrations: vibrations
            .optional()
            .describe('Missing in rigid scans and before version 0.3'),
          coordinates,
        }),
      ),
    }),
  ),
  map: z
    .object({
      torsions: z.array(z.array(z.number().int())).describe('Two times four atoms, counted from 0'),
      step: z.number().describe('Degrees between two cells'),
      perAxis: z.number().int().describe('Cells along each side'),
      cells: z
        .array(
          z.object({
            angles: z.array(z.number()).describe('Targets of both torsions, degrees'),
            energy: kcal('Model energy without the restraint').nullable(),
            relative: kcal('Energy above the lowest cell or minimum').nullable(),
            coordinates: coordinates.nullable(),
          }),
        )
        .describe(
          'Row by row, the first torsion ascending by row; null where a cell was not reached',
        ),
      minima: z.array(
        z.object({
          angles: z.array(z.number()).describe('Degrees, of the geometry itself'),
          energy: kcal('Model energy'),
          relative: kcal('Energy above the lowest cell or minimum'),
          cell: z.number().int().describe('The nearest cell, counted from 0'),
          coordinates,
        }),
      ),
    })
    .nullable(),
});

/** The schema as the text of a JSON Schema document (draft 2020-12). */
export function bundleSchemaText(): string {
  return `${JSON.stringify(z.toJSONSchema(answerSchema), null, 2)}\n`;
}
