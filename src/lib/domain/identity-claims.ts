/** What an identity provider tells about a person (OpenID Connect Core 1.0, sections 2 and 5.1). */
import { z } from 'zod';
import { addressSchema } from './accounts';

/** An address, or a name, that we could not store counts as one that was not told. */
export const identityClaimsSchema = z.object({
  iss: z.string().min(1),
  sub: z.string().min(1).max(255),
  email: addressSchema.optional().catch(undefined),
  /** Only the plain truth counts: some providers send the word. */
  email_verified: z.literal(true).optional().catch(undefined),
  name: z
    .string()
    .trim()
    .min(1)
    .max(80)
    .regex(/^\P{Cc}*$/u)
    .optional()
    .catch(undefined),
  /** When the person gave their credentials there, seconds since 1970. */
  auth_time: z.number().int().positive().optional().catch(undefined),
  /** How (RFC 8176). */
  amr: z.array(z.string()).optional().catch(undefined),
});
export type IdentityClaims = z.output<typeof identityClaimsSchema>;
