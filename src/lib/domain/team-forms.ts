/** What a lead writes into the forms about a team and its members. */
import { z } from 'zod';
import { addressSchema, nameSchema } from './accounts';
import { roles } from './roles';

const roleSchema = z.enum(roles, 'Choose a role.');

export const inviteSchema = z.object({ email: addressSchema, role: roleSchema });

export const changeRoleSchema = z.object({ member: z.uuid(), role: roleSchema });

export const memberSchema = z.object({ member: z.uuid() });

export const invitationSchema = z.object({ invitation: z.uuid() });

export const teamNameSchema = z.object({ name: nameSchema });

/** The team's name, typed by who wants it deleted. */
export const teamEndSchema = z.object({
  name: z.string().trim().min(1, 'Type the name of the team.').max(200),
});
