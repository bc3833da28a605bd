/** Where to go after a form, when the address comes from outside. */

/** The path when it leads to a page of this product, else the fallback: nobody is sent to a foreign site. */
export function localPath(given: string | null | undefined, fallback: string): string {
  const base = 'http://local.invalid';
  if (!given?.startsWith('/') || !URL.canParse(given, base)) return fallback;
  const url = new URL(given, base);
  return url.origin === base ? url.pathname + url.search : fallback;
}
