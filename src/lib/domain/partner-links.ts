/** What a member writes when they make a link for a partner. */
import { z } from 'zod';

/** How long a link may be good for, days. */
export const linkDays = [1, 7, 30, 90] as const;

const LONGEST_PASSWORD = 200;
const SHORTEST_PASSWORD = 8;

export const partnerLinkSchema = z.object({
  /** What the link shows: "batch:…" or "molecule:…". */
  subject: z.string().regex(/^(batch|molecule):[0-9a-f-]{36}$/, 'Choose what to share.'),
  days: z.coerce
    .number()
    .refine((days) => linkDays.some((each) => each === days), 'Choose how long the link is good.'),
  /** Empty for none. */
  password: z
    .string()
    .max(LONGEST_PASSWORD, 'This is too long.')
    .refine(
      (text) => text === '' || text.length >= SHORTEST_PASSWORD,
      `Use at least ${SHORTEST_PASSWORD} characters, or none.`,
    ),
});
export type PartnerLinkForm = z.output<typeof partnerLinkSchema>;

export const revokeLinkSchema = z.object({ link: z.uuid() });

export const linkPasswordSchema = z.object({ password: z.string().min(1).max(LONGEST_PASSWORD) });
