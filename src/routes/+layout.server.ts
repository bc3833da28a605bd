import type { LayoutServerLoad } from './$types';

/** Who is signed in, for the head of every page. */
export const load: LayoutServerLoad = ({ locals }) => {
  const { user, barred, memberships } = locals;
  const membership = locals.membership ?? barred?.membership;
  return {
    user: user && { name: user.name, email: user.email, isOperator: user.isOperator },
    energyUnit: user?.energyUnit ?? ('kcal/mol' as const),
    team: membership
      ? {
          id: membership.teamId,
          name: membership.teamName,
          role: membership.role,
          deletionAt: membership.deletionAt ?? null,
        }
      : null,
    teams: memberships.map(({ teamId, teamName }) => ({ id: teamId, name: teamName })),
  };
};
