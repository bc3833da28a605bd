/** A second opinion on a scan, point by point. */
import { ELEMENT_SYMBOLS } from '../src/lib/engine';
import { torsion as torsionOf } from '../src/lib/engine/geometry';
import { GFN1, GFN2 } from '../src/lib/domain/second-opinions';
import type { OpinionCurve, OpinionOutcome, ScanForOpinion } from '../src/lib/server/opinions';
import { describeMolecule } from './programs/describe-molecule';
import {
  isGap,
  type InstalledProgram,
  type PointOrGap,
  type ProgramLimits,
} from './programs/program';
import { relax, singlePoint } from './programs/xtb';

/** Told how far the work is, 0 to 1, and what it is doing. */
export type Report = (fraction: number, stage: string) => void;

type Gap = OpinionOutcome['gaps'][number];

/**
 * Quick: GFN2-xTB energies on the scan's geometries. Relaxed: each geometry relaxed by GFN2-xTB with the torsion held, and
 * GFN1-xTB energies on what came out. A point that fails is a gap with its reason.
 */
export async function computeOpinion(
  scan: ScanForOpinion,
  xtb: InstalledProgram,
  limits: ProgramLimits,
  report: Report,
): Promise<OpinionOutcome> {
  const start = performance.now();
  const molecule = describeMolecule(scan.molecule, ELEMENT_SYMBOLS);
  const isRelaxed = scan.settings.depth === 'relaxed';
  const gaps: Gap[] = [];
  const gfn2: OpinionCurve['points'][number][] = [];
  const gfn1: OpinionCurve['points'][number][] = [];
  const atoms = scan.torsion as readonly [number, number, number, number];
  const keep = (points: typeof gfn2, model: string, angle: number, point: PointOrGap) => {
    if (isGap(point)) {
      gaps.push({ angle, model, reason: point.gap });
      points.push(null);
    } else {
      points.push({ ...point, reached: torsionOf(point.coordinates, ...atoms) });
    }
  };
  for (const [n, angle] of scan.angles.entries()) {
    const stage = `${isRelaxed ? 'relaxing' : 'energy of'} point ${n + 1} of ${scan.angles.length}`;
    report(n / scan.angles.length, stage);
    const given = scan.geometries[n];
    const point = isRelaxed
      ? await relax(xtb, molecule, given, { atoms, angle }, limits)
      : await singlePoint(xtb, molecule, given, 2, limits);
    keep(gfn2, GFN2, angle, point);
    if (!isRelaxed) continue;
    const other = isGap(point)
      ? { gap: `there is no ${GFN2} geometry` }
      : await singlePoint(xtb, molecule, point.coordinates, 1, limits);
    keep(gfn1, GFN1, angle, other);
  }
  return {
    curves: [{ model: GFN2, points: gfn2 }, ...(isRelaxed ? [{ model: GFN1, points: gfn1 }] : [])],
    gaps,
    program: `xtb ${xtb.version}`,
    seconds: Math.round(performance.now() - start) / 1000,
  };
}
