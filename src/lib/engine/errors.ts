/** What a person can mend in what they sent. Everything else that goes wrong is a bug and throws plainly. */

/** The reasons for which a molecule or a request is refused. */
export type InputErrorCode =
  | 'empty-input'
  | 'unreadable'
  | 'mixture'
  | 'unknown-element'
  | 'too-large'
  | 'valence'
  | 'radical'
  | 'query-feature'
  | 'unsupported-environment'
  | 'missing-geometry'
  | 'bad-geometry'
  | 'bad-torsion'
  | 'no-such-bond'
  | 'bad-setting'
  | 'no-conformer';

/** Where in the input the trouble is; atoms count from 0, lines from 1. */
export interface InputPlace {
  readonly atom?: number;
  readonly line?: number;
}

/** Input that a person can mend: a code for programs, a sentence for people, and the place. */
export class InputError extends Error {
  readonly code: InputErrorCode;
  readonly atom: number | undefined;
  readonly line: number | undefined;

  constructor(code: InputErrorCode, message: string, place: InputPlace = {}) {
    super(message);
    this.name = 'InputError';
    this.code = code;
    this.atom = place.atom;
    this.line = place.line;
  }
}

/** The things worth telling about an input that was accepted all the same. */
export type InputWarningCode =
  | 'undefined-stereocenter'
  | 'undefined-double-bond'
  | 'stereo-from-geometry'
  | 'geometry-ignored'
  | 'geometry-built'
  | 'hydrogens-added'
  | 'name-ignored'
  | 'not-converged'
  | 'incomplete-search';

/** A remark on an accepted input or a finished computation: never a silent guess. */
export interface InputWarning extends InputPlace {
  readonly code: InputWarningCode;
  readonly message: string;
}
