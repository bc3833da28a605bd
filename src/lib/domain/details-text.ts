/** The details of a line of a record in words: "name: Dienes, queued: 7". */
export function detailsText(details: unknown): string {
  return Object.entries(details as Record<string, unknown>)
    .map(([name, value]) => `${name}: ${typeof value === 'string' ? value : JSON.stringify(value)}`)
    .join(', ');
}
