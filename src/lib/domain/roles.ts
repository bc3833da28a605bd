/** Who may do what in a team: the one table that every route and every button reads. */

/** Roles from the least to the most trusted; each may do all that the ones before it may. */
export const roles = ['reader', 'chemist', 'modeler', 'lead'] as const;
export type Role = (typeof roles)[number];

/** The lowest role that may do each thing. */
export const lowestRole = {
  'read results': 'reader',
  'download bundles': 'reader',
  'submit molecules': 'chemist',
  'write comments': 'chemist',
  'submit bulk batches': 'modeler',
  'cancel tasks': 'modeler',
  'rerun tasks': 'modeler',
  'share with partners': 'modeler',
  'pin batches': 'modeler',
  'manage members': 'lead',
  'manage limits': 'lead',
  'manage webhooks': 'lead',
  'read the record': 'lead',
  'delete results': 'lead',
  'export the team': 'lead',
  'delete the team': 'lead',
  'delete any comment': 'lead',
} as const satisfies Record<string, Role>;
export type Permission = keyof typeof lowestRole;

/** Most molecules a chemist may submit in one batch; a larger one is a bulk batch. */
export const CHEMIST_BATCH_LIMIT = 50;

/** True when the role may do the thing. */
export function may(role: Role, permission: Permission): boolean {
  return roles.indexOf(role) >= roles.indexOf(lowestRole[permission]);
}
