/** Reading a form by its schema. */
import type { z } from 'zod';

/** Fields whose content never travels back to the page. */
const SECRET_FIELDS = ['password', 'current', 'token', 'code'];

export interface FormFaults {
  /** What was written, for filling the form again. */
  readonly values: Record<string, string>;
  /** The first fault of each field. */
  readonly errors: Record<string, string>;
}

/** No values, or no errors: what a form answers where there is nothing to say. */
export const nothing: Record<string, string> = {};

/** The one fault of a form that was read without any. */
export const faultOf = (field: string, message: string): Record<string, string> => ({
  [field]: message,
});

export type ReadForm<T> =
  | { readonly data: T; readonly values: Record<string, string> }
  | { readonly data: null; readonly faults: FormFaults };

/** Reads the text fields of a form and checks them; fields that are missing count as empty. */
export async function readForm<S extends z.ZodObject>(
  request: Request,
  schema: S,
): Promise<ReadForm<z.output<S>>> {
  const form = await request.formData();
  const given = Object.fromEntries(
    Object.keys(schema.shape).map((name) => {
      const value = form.get(name);
      return [name, typeof value === 'string' ? value : ''];
    }),
  );
  const values = Object.fromEntries(
    Object.entries(given).filter(([name]) => !SECRET_FIELDS.includes(name)),
  );
  const parsed = schema.safeParse(given);
  if (parsed.success) return { data: parsed.data, values };
  const errors: Record<string, string> = {};
  for (const { path, message } of parsed.error.issues) errors[String(path[0])] ??= message;
  return { data: null, faults: { values, errors } };
}
