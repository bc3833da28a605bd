import { operations } from '$lib/domain/api';
import { serve } from '$lib/server/api';

export const GET = serve(operations.me, async ({ member, scopes }) => ({
  userId: member.userId,
  team: { id: member.teamId, name: member.teamName, role: member.role },
  scopes: [...scopes],
}));
