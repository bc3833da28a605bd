/** All that a team has in one streamed zip: nothing of other teams, no passwords, no secrets. */
import { eq } from 'drizzle-orm';
import { createNamer } from '../domain/file-names';
import { openArchive, type ArchiveWriter } from './archive-writer';
import { addBatch, addReadingHelp, type Bundle } from './bundles';
import { db } from './db';
import { teams } from './db/schema';
import { recordEvent } from './events';
import { teamLimitsFrom } from './limits';
import { require, type Member } from './member';
import { exportCsv } from './record';
import { exportReadme } from './team-export-readme';
import {
  batchLines,
  linkLines,
  memberLines,
  moleculeLines,
  noteLines,
  rowLines,
  submitted,
} from './team-export-tables';

/** Opens the export of the member's team. */
export async function exportTeam(member: Member): Promise<Bundle> {
  require(member, 'export the team');
  const [team] = await db.select().from(teams).where(eq(teams.id, member.teamId));
  await recordEvent(db, member, 'export team', `team:${member.teamId}`);
  const archive = openArchive((writer) => fill(writer, member, team));
  return { fileName: `${createNamer()(team.name)}-everything.zip`, archive };
}

async function fill(
  writer: ArchiveWriter,
  member: Member,
  team: typeof teams.$inferSelect,
): Promise<void> {
  const { teamId } = member;
  await writer.add({ path: 'README.md', content: exportReadme(team.name, new Date()) });
  const { id, name, createdAt, limits } = team;
  const about = { id, name, createdAt, limits: teamLimitsFrom(limits), limitsSet: limits };
  await writer.add({ path: 'team.json', content: `${JSON.stringify(about, null, 2)}\n` });
  await writer.addLines('members.csv', memberLines(teamId));
  await writer.addLines('notes.csv', noteLines(teamId));
  await writer.addLines('partner-links.csv', linkLines(teamId));
  await writer.addLines('molecules.csv', moleculeLines(teamId));
  await writer.addLines('record.csv', exportCsv(member, {}));
  const folders = new Map<string, string>();
  const nameFor = createNamer();
  const kinds = new Map<string, { kind: string; model: string; engineVersion: string }>();
  for await (const batch of submitted(teamId)) {
    const folder = `batches/${nameFor(batch.name)}/`;
    folders.set(batch.id, folder);
    await writer.addLines(`${folder}rows.csv`, rowLines(batch.id));
    for (const { kind, model, engineVersion } of await addBatch(writer, member, batch.id, folder)) {
      kinds.set(`${kind} ${model} ${engineVersion}`, { kind, model, engineVersion });
    }
  }
  await writer.addLines('batches.csv', batchLines(teamId, folders));
  await addReadingHelp(writer, [...kinds.values()]);
  const sums = `${JSON.stringify({ sha256: writer.sums }, null, 2)}\n`;
  await writer.add({ path: 'manifest.json', content: sums });
}
