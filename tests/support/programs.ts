/** The external programs of tests: Debian's, where they are installed; tests that need a missing one are skipped. */
import { existsSync } from 'node:fs';

export const XTB = '/usr/bin/xtb';
export const MOPAC = '/usr/bin/mopac';
export const hasXtb = existsSync(XTB);
export const hasMopac = existsSync(MOPAC);
