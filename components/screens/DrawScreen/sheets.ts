/** What stands open over the table; one at a time, a second one replaces the first. */
export type OpenSheet =
  | { kind: 'number'; id: NumberId }
  | { kind: 'ink'; place: number }
  | { kind: 'newInk' }
  | { kind: 'payload'; place: number }
  | { kind: 'level' }
  | { kind: 'markers' }
  | { kind: 'device' }
  | { kind: 'peak' }
  | { kind: 'sentence' }
  | { kind: 'keys' }
  | { kind: 'ask' }
  | { kind: 'more' }
  | { kind: 'title' };

/** The numbers strip's words with one number field each. */
export type NumberId =
  | 'fftSize'
  | 'spacing'
  | 'symbols'
  | 'prefix'
  | 'overlap'
  | 'oversampling'
  | 'offset'
  | 'mode'
  | 'gap'
  | 'repeats'
  | 'pad';
