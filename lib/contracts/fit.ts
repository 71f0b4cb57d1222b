import { z } from '@/lib/document/zod';
import { ulidSchema } from './common';
import { defineEndpoint } from './endpoint';
import { issueSchema } from './problem';

/** A plain change of the document; the editor makes it a patch. */
const plainChangeSchema = z.object({ pointer: z.string(), before: z.unknown(), after: z.unknown() });

const remedySchema = z.object({
  kind: z.enum([
    'repeats',
    'dropRepeats',
    'oversampling',
    'spacing',
    'fftSize',
    'offset',
    'tones',
    'payload',
    'mode',
    'gap',
    'pad',
    'markers',
    'headroom',
    'outputLevel',
  ]),
  label: z.string(),
  changes: z.array(plainChangeSchema),
  /** Samples that the file gains, and how far frequencies move, in ppm of the sample clock. */
  price: z.object({ samples: z.number(), ppm: z.number() }),
  cost: z.string(),
});

export const fitFindingSchema = z
  .object({
    check: z.enum([
      'clock',
      'granularity',
      'leastLength',
      'memory',
      'mode',
      'word',
      'markers',
      'seam',
      'toneJump',
      'payloadWrap',
      'symbolPeak',
      'headroom',
      'level',
    ]),
    title: z.string(),
    measured: z.number().nullable(),
    limit: z.number().nullable(),
    unit: z.enum(['samples', 'Hz', 'dB', 'dBm', 'markers', 'turns', 'repeats', 'components']).nullable(),
    distance: z.number().nullable(),
    verdict: z.enum(['meets', 'misses', 'cannotJudge']),
    /** A miss refuses the pack. */
    hard: z.boolean(),
    byHowMuch: z.string(),
    found: z.string(),
    words: z.string(),
    /** Repeats first, then what moves clock or frequencies, then silence. Each is judged alone. */
    remedies: z.array(remedySchema),
  })
  .meta({ id: 'FitFinding' });

export const fitSchema = z
  .object({
    revisionId: ulidSchema,
    bench: z.object({
      benchId: ulidSchema,
      version: z.number().int().positive(),
      name: z.string(),
      /** A newer version exists: check again. */
      isNewest: z.boolean(),
    }),
    findings: z.array(fitFindingSchema),
    /** Why no file can be written in the profile's layout (a WAV file of 4 GiB); a pack is refused. */
    notSupportedYet: z.array(issueSchema),
    /**
     * Headroom and level can be judged only once the levels are `measured`. `measuring`: ask again soon. `unknown`: the file is too long to
     * be measured here; its pack measures it.
     */
    levels: z.enum(['measured', 'measuring', 'unknown']),
    /** Steps |x[n+1] − x[n]| and the last and first samples of the file, interleaved re, im, all over its RMS; null until measured. */
    seam: z.object({ stepAtWrap: z.number(), stepElsewhere: z.number(), around: z.array(z.number()) }).nullable(),
  })
  .meta({ id: 'Fit' });
export type Fit = z.infer<typeof fitSchema>;

export const showFit = defineEndpoint({
  name: 'showFit',
  method: 'GET',
  path: '/revisions/:revisionId/fit',
  access: 'readWaveforms',
  summary: 'A revision against a bench profile, its newest version unless asked',
  params: z.object({ revisionId: ulidSchema }),
  query: z.strictObject({ benchId: ulidSchema, version: z.coerce.number().int().positive().optional() }),
  response: fitSchema,
});

export const fitEndpoints = [showFit] as const;
