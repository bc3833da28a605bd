/** Letters that the development mail catcher holds; there are none where letters go to a real mail server. */
import { z } from 'zod';
import { environment } from './environment';

const lettersSchema = z.array(
  z.object({
    id: z.number(),
    at: z.coerce.date(),
    to: z.string(),
    subject: z.string(),
    text: z.string(),
    html: z.string(),
  }),
);
export type CaughtLetter = z.infer<typeof lettersSchema>[number];

/** All caught letters, newest first; null where nothing catches letters. */
export async function readCaughtLetters(): Promise<CaughtLetter[] | null> {
  const url = environment.WINDLASS_MAIL_CATCHER_URL;
  if (!url) return null;
  const response = await fetch(url, { signal: AbortSignal.timeout(5_000) });
  return lettersSchema.parse(await response.json());
}
