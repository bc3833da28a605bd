import { describe, expect, it } from 'vitest';
import { lowestRole, may, roles, type Permission, type Role } from './roles';

/** What each role may do, written out: the product's promise to its teams, not read from the table it checks. */
const expected: Record<Role, Permission[]> = {
  reader: ['read results', 'download bundles'],
  chemist: ['read results', 'download bundles', 'submit molecules', 'write comments'],
  modeler: [
    'read results',
    'download bundles',
    'submit molecules',
    'write comments',
    'submit bulk batches',
    'cancel tasks',
    'rerun tasks',
    'share with partners',
    'pin batches',
  ],
  lead: [
    'read results',
    'download bundles',
    'submit molecules',
    'write comments',
    'submit bulk batches',
    'cancel tasks',
    'rerun tasks',
    'share with partners',
    'pin batches',
    'manage members',
    'manage limits',
    'manage webhooks',
    'read the record',
    'delete results',
    'export the team',
    'delete the team',
    'delete any comment',
  ],
};

describe('may', () => {
  it.each(roles)('gives a %s exactly what was promised', (role) => {
    const permissions = Object.keys(lowestRole) as Permission[];
    expect(permissions.filter((permission) => may(role, permission))).toEqual(expected[role]);
  });
});
