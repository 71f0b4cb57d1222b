/** Why lib/synth refused: stable words that callers may branch on. */
export type SynthErrorCode =
  | 'bad_size'
  | 'bad_index'
  | 'bad_content'
  | 'bad_layout'
  | 'buffer_too_small'
  | 'marker_outside'
  | 'nothing_painted'
  | 'too_large';

/**
 * A broken precondition of lib/synth. Expected outcomes (a misfit, a silent frame) are values, never this.
 * `code` is stable; `message` is for people.
 */
export class SynthError extends Error {
  readonly code: SynthErrorCode;

  constructor(code: SynthErrorCode, message: string) {
    super(message);
    this.name = 'SynthError';
    this.code = code;
  }
}

/** Throws SynthError(`code`) unless `condition` holds. */
export function demand(condition: boolean, code: SynthErrorCode, message: string): asserts condition {
  if (!condition) throw new SynthError(code, message);
}
