/** The second opinions on a scan as its section shows them. */
import type { OpinionDepth } from '../domain/second-opinions';
import type { Answer, StoredProfile } from './answers';
import type { OpinionOutcome } from './opinions';

/** The opinions on one profile, the relaxed one first; those that newer ones replaced have no curves any more. */
export function opinionsOn(profile: StoredProfile, answers: readonly Answer[]) {
  return answers
    .filter(({ profiles }) => profiles.length > 1 && profiles[0].id === profile.id)
    .map((answer) => {
      const { depth, program, gaps } = answer.details as {
        depth: OpinionDepth;
        program: string;
        gaps: OpinionOutcome['gaps'];
      };
      return {
        id: answer.id,
        depth,
        program,
        gaps,
        seconds: answer.seconds,
        curves: answer.profiles.slice(1).map(({ model, points }) => ({
          model,
          energies: profile.points.map(
            ({ angle }) => points.find((point) => point.angle === angle)?.energy ?? null,
          ),
        })),
      };
    })
    .toSorted((a, b) => Number(b.depth === 'relaxed') - Number(a.depth === 'relaxed'));
}
