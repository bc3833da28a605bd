/** A molecule's answers with all that belongs on paper: plots, methods, literature and cautions. */
import MarkdownIt from 'markdown-it';
import { mapPlot } from '../charts/map-plot';
import { profilePlot } from '../charts/profile-plot';
import type { EnergyUnit } from '../domain/energy-units';
import { methodsText } from '../domain/methods';
import { ENGINE_VERSION } from '../engine';
import type { Member } from './member';
import * as moleculePage from './molecule-page';

const markdown = new MarkdownIt({ html: false });

/** What the printed report of a molecule shows, its plots in the unit. */
export async function load(member: Member, moleculeId: string, unit: EnergyUnit) {
  const molecule = await moleculePage.load(member, moleculeId);
  const { conformers, scans, maps, conjugation, strain } = molecule;
  const kinds = { conformers, scan: scans, map: maps, conjugation, strain };
  const answers = Object.entries(kinds).flatMap(([kind, found]) =>
    found.map((answer) => ({ ...answer, kind: kind as keyof typeof kinds })),
  );
  const distinct = (values: string[]) => [...new Set(values)];
  return {
    molecule: {
      ...molecule,
      scans: scans.map((scan) => ({
        ...scan,
        plot: profilePlot({
          title: `${molecule.name}, turn about ${scan.bond}`,
          unit,
          points: scan.points,
          stationary: scan.stationary,
        }),
      })),
      maps: maps.map((map) => ({
        ...map,
        plot: mapPlot({
          title: `${molecule.name}, ${map.torsions.map(({ bond }) => bond).join(' and ')}`,
          axes: map.torsions.map(({ name }) => name),
          unit,
          step: map.step,
          perAxis: map.perAxis,
          energies: map.energies,
          minima: map.minima,
        }),
      })),
    },
    origins: answers.map(({ id, kind, model, engineVersion, settings, seconds, warnings }) => ({
      id,
      kind,
      model,
      engineVersion,
      settings,
      seconds,
      warnings,
    })),
    methods: markdown.render(
      // One level lower: the report's own title is the first heading.
      methodsText({
        engineVersion:
          distinct(answers.map((each) => each.engineVersion)).join(' and ') || ENGINE_VERSION,
        models: distinct(answers.map((each) => each.model)),
        kinds: distinct(answers.map((each) => each.kind)),
      }).replace(/^#/gm, '##'),
    ),
  };
}
