/** Notes as safe HTML: a small part of Markdown, no HTML of the author's own, and people named by their present name. */
import MarkdownIt from 'markdown-it';
import type { Person } from '../domain/notes';

const MENTION = /^@\{([0-9a-f-]{36})\}/;
/** Addresses that a link may have: of the web, of mail, and within the product. */
const SAFE_LINK = /^(https?:\/\/|mailto:|\/[^/\\]|#)/i;

const markdown = new MarkdownIt({ html: false, linkify: true, breaks: true });
// Images would be fetched from elsewhere; headings would break the order of the page's own.
markdown.disable(['image', 'heading', 'lheading', 'table', 'hr']);
markdown.linkify.set({ fuzzyLink: false, fuzzyEmail: false, fuzzyIP: false });
markdown.validateLink = (address) => SAFE_LINK.test(address.trim());

markdown.inline.ruler.push('mention', (state, silent) => {
  const [token, id] = MENTION.exec(state.src.slice(state.pos)) ?? [];
  if (token === undefined || id === undefined) return false;
  if (!silent) state.push('mention', '', 0).content = id;
  state.pos += token.length;
  return true;
});

markdown.renderer.rules['mention'] = (tokens, index, _options, environment) => {
  const names = environment?.['names'] as ReadonlyMap<string, string> | undefined;
  const name = names?.get(tokens[index].content) ?? 'a former member';
  return `<span class="mention">@${markdown.utils.escapeHtml(name)}</span>`;
};

markdown.renderer.rules['link_open'] = (tokens, index, options, _environment, renderer) => {
  tokens[index].attrSet('rel', 'nofollow noopener noreferrer');
  return renderer.renderToken(tokens, index, options);
};

/** The HTML of a stored note; it is safe to put into a page as it is. */
export function renderNote(stored: string, people: readonly Pick<Person, 'id' | 'name'>[]): string {
  return markdown.render(stored, { names: new Map(people.map(({ id, name }) => [id, name])) });
}
