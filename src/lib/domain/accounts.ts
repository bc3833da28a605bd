/** What a person writes into the forms about their account. */
import { z } from 'zod';
import { findPasswordFault, LONGEST_PASSWORD } from './passwords';

const LONGEST_NAME = 80;

/** An e-mail address, in the form it is stored in. */
export const addressSchema = z
  .string()
  .trim()
  .toLowerCase()
  .max(254, 'This address is too long.')
  .pipe(z.email('Write an e-mail address, like name@example.org.'));

export const nameSchema = z
  .string()
  .trim()
  .min(1, 'Write the name that your team shall see.')
  .max(LONGEST_NAME, `Use at most ${LONGEST_NAME} characters.`)
  // Control characters have no place in a name and would break a letter's head.
  .regex(/^\P{Cc}*$/u, 'A name is one line of text.');

/** The same characters typed on another keyboard are the same password (NIST SP 800-63B: normalize before hashing). */
const passwordText = z.string().transform((text) => text.normalize('NFKC'));

/** A password as given at a sign-in: anything may be tried. */
export const givenPasswordSchema = passwordText.pipe(
  z
    .string()
    .min(1, 'Write your password.')
    .max(LONGEST_PASSWORD * 4, 'This is too long.'),
);

/** A new password, judged without knowing whose it is. */
export const newPasswordSchema = passwordText.superRefine((password, context) => {
  const fault = findPasswordFault(password);
  if (fault) context.addIssue({ code: 'custom', message: fault });
});

export const signUpSchema = z
  .object({ name: nameSchema, email: addressSchema, password: passwordText })
  .superRefine(({ name, email, password }, context) => {
    const fault = findPasswordFault(password, [name, email]);
    if (fault) context.addIssue({ code: 'custom', path: ['password'], message: fault });
  });
export type SignUp = z.output<typeof signUpSchema>;

/** A sign-up by an invitation, which names the address already. */
export const joinSchema = z.object({
  token: z.string().max(100),
  name: nameSchema,
  password: newPasswordSchema,
});

export const signInSchema = z.object({ email: addressSchema, password: givenPasswordSchema });

/** A sign-in that first confirms the address, with the secret of the letter. */
export const confirmAndSignInSchema = signInSchema.extend({ confirmToken: z.string().max(100) });

export const confirmFormSchema = z.object({
  token: z.string().max(100),
  password: givenPasswordSchema,
});

export const addressFormSchema = z.object({ email: addressSchema });

export const resetPasswordSchema = z.object({
  token: z.string().max(100),
  password: newPasswordSchema,
});

export const changePasswordSchema = z.object({
  current: givenPasswordSchema,
  password: newPasswordSchema,
});

export const renameSchema = z.object({ name: nameSchema });

export const sessionSchema = z.object({ session: z.uuid() });
