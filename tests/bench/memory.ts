/** Memory: a child process searching a 71-atom molecule, and growth over 1,000 molecules in one process. */
import { spawnSync } from 'node:child_process';
import { fileURLToPath } from 'node:url';
import type { MemoryReport } from './memory-child';
import { verapamil } from './molecules';
import { markdownTable } from './report';

const child = fileURLToPath(new URL('./memory-child.ts', import.meta.url));

/** Runs one of the child's tasks in a process of its own. */
function inChild(task: 'search' | 'many'): MemoryReport {
  const { status, stdout, stderr } = spawnSync(
    process.execPath,
    ['--expose-gc', '--import', 'tsx', child, task],
    { encoding: 'utf8' },
  );
  if (status !== 0) throw new Error(`the child process failed: ${stderr}`);
  return JSON.parse(stdout) as MemoryReport;
}

/** The section's report in Markdown. */
export function memorySection(): string {
  const search = inChild('search');
  const many = inChild('many');
  const rows = [
    [`search of ${verapamil.name} (71 atoms)`, ...cells(search)],
    [`${many.molecules} molecules in one process`, ...cells(many)],
  ];
  const head = ['child process', 'seconds', 'highest resident set, MB', 'heap in use after the first tenth → at the end, MB', 'resident then → at the end, MB']; // prettier-ignore
  return `## Memory\n\n${markdownTable(head, rows)}`;
}

function cells({ seconds, highestResident, early, late }: MemoryReport): string[] {
  const megabytes = (bytes: number): string => (bytes / 2 ** 20).toFixed(0);
  return [
    seconds.toFixed(1),
    megabytes(highestResident),
    `${megabytes(early.heap)} → ${megabytes(late.heap)}`,
    `${megabytes(early.resident)} → ${megabytes(late.resident)}`,
  ];
}
