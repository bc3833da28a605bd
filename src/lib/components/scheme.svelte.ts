/** Light or dark paper, for what cannot follow the style sheet by itself, like the 3-D view. */
import { MediaQuery } from 'svelte/reactivity';

const dark = new MediaQuery('(prefers-color-scheme: dark)');

/** The scheme in which the page is shown; reactive. */
export function currentScheme(): 'light' | 'dark' {
  return dark.current ? 'dark' : 'light';
}
