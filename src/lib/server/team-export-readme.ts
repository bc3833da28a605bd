/** What an export of a team says about itself. */
export function exportReadme(team: string, at: Date): string {
  return `# All that ${team} had on Windlass

Written on ${at.toISOString()}. Text is UTF-8, times are UTC, energies are in kcal/mol, lengths in Å, angles in degrees.

- \`team.json\`: the team, the limits in force and those that a lead set
- \`members.csv\`: who belonged to the team, in which role and with which limits
- \`batches.csv\`: every submitted batch with its folder here, what was computed and how rows were read
- \`batches/…/rows.csv\`: the rows of a batch as given, their verdicts, and their tasks with settings and states
- \`batches/…/NAME/\`: the answers for a row, as in the bundle of the batch: JSON (\`answer.schema.json\` describes it),
  tables as CSV, geometries as SDF, plots as SVG
- \`molecules.csv\`: every structure as it was computed; other files name molecules by its \`id\`
- \`notes.csv\`: what people wrote; \`answer to\` names the note that opens the thread, \`@{…}\` in a text names a person
- \`partner-links.csv\`: links that were given to partners, without the secrets
- \`record.csv\`: who did what to what, and when
- \`methods.md\`: how the answers were computed, with the literature
- \`manifest.json\`: the SHA-256 of every other file

Passwords, tokens and the secrets of links are not in here. Drafts that nobody submitted are not either. Results that
were removed for their age are gone; their batches are listed.

Energies are those of a gas-phase model, typically 0.5 to 2 kcal/mol off: estimates, not measurements.
`;
}
