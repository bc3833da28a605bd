/** Text in SVG documents that are written as strings. */

const ENTITIES: Readonly<Record<string, string>> = {
  '&': '&amp;',
  '<': '&lt;',
  '>': '&gt;',
  '"': '&quot;',
};

/** The text with every sign that markup would take for its own replaced. */
export function escapeText(text: string): string {
  return text.replace(/[&<>"]/g, (sign) => ENTITIES[sign]);
}
