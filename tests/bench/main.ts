/**
 * The bench: how fast and how lean the engine is beside openchemlib and, where installed, RDKit, in the same run;
 * how quickly the pages of a large team answer, and how smoothly a molecule turns.
 *
 *     npm run bench                          every section
 *     npm run bench -- minimization scan     some of: minimization, scan, search, memory, pages, search-page, turning
 *     npm run bench -- --record              keeps the report in tests/bench/results
 */
import { mkdirSync, writeFileSync } from 'node:fs';
import { cpus, hostname } from 'node:os';
import { fileURLToPath } from 'node:url';
import { registerChemistryResources } from '$lib/server/chemistry-resources';
import { memorySection } from './memory';
import { minimizationSection } from './minimization';
import { pagesSection } from './pages';
import { hasRdkit } from './rdkit';
import { scanSection } from './scan';
import { searchSection } from './search';
import { searchPageSection } from './search-page';
import { turningSection } from './turning';

const sections: Record<string, (rdkit: boolean) => Promise<string> | string> = {
  minimization: minimizationSection,
  scan: scanSection,
  search: searchSection,
  memory: memorySection,
  pages: pagesSection,
  'search-page': searchPageSection,
  turning: turningSection,
};

const chosen = process.argv.slice(2).filter((argument) => argument !== '--record');
const record = process.argv.includes('--record');
const unknown = chosen.filter((name) => !(name in sections));
if (unknown.length > 0) {
  console.error(
    `No section ${unknown.join(', ')}; there are: ${Object.keys(sections).join(', ')}.`,
  );
  process.exit(2);
}

registerChemistryResources();
const rdkit = hasRdkit();
const date = new Date().toISOString().slice(0, 10);
const report = [
  `# Bench of ${date} on ${hostname()}`,
  `${cpus().length} × ${cpus()[0].model}, Node.js ${process.version}, RDKit ${rdkit ? 'present' : 'not installed'}; times are processor time of one thread; "×" is how many times as fast ours is.`,
];
console.log(report.join('\n\n'));
for (const name of chosen.length > 0 ? chosen : Object.keys(sections)) {
  const section = await sections[name](rdkit);
  console.log(`\n${section}`);
  report.push(section);
}

if (record) {
  const folder = fileURLToPath(new URL('./results/', import.meta.url));
  mkdirSync(folder, { recursive: true });
  writeFileSync(`${folder}${date}-${hostname()}.md`, `${report.join('\n\n')}\n`);
}
