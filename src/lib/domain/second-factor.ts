/** The second factor: one-time passwords of an app (RFC 6238), and recovery codes for who has lost it. */
import { z } from 'zod';
import { givenPasswordSchema } from './accounts';

export const CODE_DIGITS = 6;
export const RECOVERY_CODES = 10;
/** Characters of a recovery code; those that look alike are left out. */
export const RECOVERY_ALPHABET = 'abcdefghjkmnpqrstuvwxyz23456789';
export const RECOVERY_LENGTH = 10;

/** A code as people type it: with spaces or a dash, or in capitals. */
const typedCode = z
  .string()
  .max(40)
  .transform((text) => text.toLowerCase().replace(/[\s-]/g, ''));

const isAppCode = (code: string) => /^\d{6}$/.test(code);
const isRecoveryCode = (code: string) =>
  code.length === RECOVERY_LENGTH && [...code].every((each) => RECOVERY_ALPHABET.includes(each));

/** A code of the app. */
export const appCodeSchema = typedCode.refine(
  isAppCode,
  `Write the ${CODE_DIGITS} digits that the app shows.`,
);

/** A code of the app, or a recovery code. */
export const anyCodeSchema = typedCode.refine(
  (code) => isAppCode(code) || isRecoveryCode(code),
  `Write the ${CODE_DIGITS} digits that the app shows, or a recovery code.`,
);

export const codeFormSchema = z.object({ code: anyCodeSchema });
export const appCodeFormSchema = z.object({ code: appCodeSchema });

/** What is given to prove once more who one is; the code counts where a second factor is on. */
export const proveAgainSchema = z.object({
  password: givenPasswordSchema,
  code: typedCode,
});

/** A recovery code in two groups, as it is shown. */
export function showRecoveryCode(code: string): string {
  const half = RECOVERY_LENGTH / 2;
  return `${code.slice(0, half)}-${code.slice(half)}`;
}
