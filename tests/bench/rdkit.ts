/** RDKit as a yardstick, where /usr/bin/python3 has it. */
import { spawnSync } from 'node:child_process';
import { fileURLToPath } from 'node:url';

const PYTHON = '/usr/bin/python3';
const script = fileURLToPath(new URL('./rdkit_timings.py', import.meta.url));

/** True when RDKit can be asked. */
export function hasRdkit(): boolean {
  return spawnSync(PYTHON, ['-c', 'import rdkit']).status === 0;
}

interface Requests {
  minimize: {
    request: { molfiles: string[]; repeats: number };
    answer: { setup: number; seconds: number; energies: number[]; gradientRms: number[] };
  };
  constrained: {
    request: {
      starts: { molfile: string; angle: number }[];
      torsion: readonly number[];
      repeats: number;
    };
    answer: { seconds: number; energies: number[]; gradientRms: number[] };
  };
  conformers: {
    request: { smiles: string; count: number };
    answer: { embedding: number; seconds: number; lowest: number };
  };
}

/** Asks RDKit; times are seconds of processor time, measured inside Python. */
export function askRdkit<Task extends keyof Requests>(
  task: Task,
  request: Requests[Task]['request'],
): Requests[Task]['answer'] {
  const { status, stdout, stderr } = spawnSync(PYTHON, [script], {
    input: JSON.stringify({ task, ...request }),
    encoding: 'utf8',
    maxBuffer: 1 << 28,
  });
  if (status !== 0) throw new Error(`RDKit failed: ${stderr}`);
  return JSON.parse(stdout) as Requests[Task]['answer'];
}
