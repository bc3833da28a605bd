/** When people hear by letter that their batches have ended. */
import { z } from 'zod';

export const batchLetterChoices = ['off', 'each', 'daily'] as const;
export type BatchLetterChoice = (typeof batchLetterChoices)[number];

/** The hour of the daily letter, UTC. */
export const DAILY_LETTER_HOUR = 7;

/** What each choice means, as the account page says it. */
export const batchLetterNames: Record<BatchLetterChoice, string> = {
  off: 'Never',
  each: 'When a batch has ended',
  daily: `Once a day, at ${String(DAILY_LETTER_HOUR).padStart(2, '0')}:00 UTC, summing up`,
};

export const batchLettersSchema = z.object({
  choice: z.enum(batchLetterChoices, 'Choose when letters come.'),
});
