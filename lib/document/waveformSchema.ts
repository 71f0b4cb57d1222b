import { z } from './zod';
import { contentProblems } from './contentRules';
import { checkRowOfSymbolShape, checkRowsShape, mostSymbols } from './gridRules';
import { inkSchema } from './inkSchema';
import { customIssue } from './issues';
import { bigArray, fraction, freeText, isWholeIn, lineText, list, most32, nameText, real, whole } from './schemaParts';
import { streamSchema } from './sourceSchema';

const grid = z
  .strictObject({
    rows: bigArray<number[][]>(checkRowsShape, {
      type: 'array',
      minItems: 1,
      maxItems: mostSymbols,
      items: { type: 'array', minItems: 2, items: { type: 'integer', minimum: 0, maximum: 16384 } },
    }),
    rowOfSymbol: bigArray<number[]>(checkRowOfSymbolShape, {
      type: 'array',
      minItems: 1,
      maxItems: mostSymbols,
      items: { type: 'integer', minimum: 0, maximum: mostSymbols - 1 },
    }),
  })
  .meta({ id: 'RunGrid' });

const prefixSamples = bigArray<number[]>(
  (values, issues) => {
    if (values.length < 1) issues.add([], 'must have at least 1 entry');
    if (values.length > mostSymbols) {
      issues.add([], `must have at most ${mostSymbols} entries, not ${values.length}`);
      return;
    }
    for (let at = 0; at < values.length; at += 1) {
      if (!isWholeIn(values[at], 0, 16384)) issues.add([at], 'must be a whole number of samples, 0 to the FFT size');
    }
  },
  { type: 'array', minItems: 1, maxItems: mostSymbols, items: { type: 'integer', minimum: 0, maximum: 16384 } },
);

const timing = z.strictObject({
  mode: z.enum(['loop', 'burst']),
  repeats: whole(1, 65536),
  gapSamples: whole(0, most32),
  padSamples: whole(0, most32),
});

const reduction = { targetPaprDb: real(3, 20), iterations: whole(1, 1000) };
const peakReduction = z.discriminatedUnion('kind', [
  z.strictObject({ kind: z.literal('none') }),
  z.strictObject({ kind: z.literal('clipAndFilter'), ...reduction }),
  z.strictObject({ kind: z.literal('toneReservation'), ...reduction }),
]);

const marker = z
  .strictObject({
    name: nameText(),
    at: z.enum(['file', 'repeat', 'symbol']),
    symbol: whole(0, mostSymbols - 1).nullable(),
    offsetSamples: whole(-(2 ** 31), 2 ** 31),
    lengthSamples: whole(1, 2 ** 31),
  })
  .check((payload) => {
    if (payload.issues.length > 0) return;
    if (payload.value.at !== 'symbol' && payload.value.symbol !== null) {
      payload.issues.push(customIssue(['symbol'], 'must be null unless the marker stands at a symbol', undefined));
    }
  })
  .meta({ id: 'Marker' });

export const levelReferences = ['interpolatedPeak', 'samplePeak', 'componentPeak', 'rms'] as const;

/** All that decides a sample, with the rules across its fields (those are checked once every field is right by itself). */
export const waveformContentSchema = z
  .strictObject({
    fftSize: whole(16, 16384),
    subcarrierSpacingHz: fraction(),
    symbolCount: whole(1, mostSymbols),
    prefixSamples,
    overlapSamples: whole(0, 16384),
    oversampling: whole(1, 16),
    frequencyOffsetHz: real(),
    timing,
    tray: list(inkSchema, 1, 64),
    grid,
    streams: list(streamSchema, 0, 8),
    peakReduction,
    level: z.strictObject({ reference: z.enum(levelReferences), headroomDb: real(0, 60) }),
    markers: list(marker, 0, 4),
  })
  .check((payload) => {
    if (payload.issues.length > 0) return;
    payload.issues.push(...contentProblems(payload.value));
  })
  .meta({ id: 'WaveformContent' });

export const waveformAboutSchema = z
  .strictObject({ title: lineText(1, 120), notes: freeText(4000), basedOn: lineText(1, 400).nullable() })
  .meta({ id: 'WaveformAbout' });

const levelDbm = real(-200, 100).nullable();

export const waveformIntentSchema = z
  .strictObject({
    outputRmsDbm: levelDbm,
    lossDb: real(0, 200),
    devicePeakLimitDbm: levelDbm,
    deviceMeanLimitDbm: levelDbm,
    levelToleranceDb: real(0, 20),
  })
  .meta({ id: 'WaveformIntent' });

export const waveformDocumentSchema = z
  .strictObject({
    format: z.literal('combwright.waveform'),
    version: z.literal(1),
    about: waveformAboutSchema,
    content: waveformContentSchema,
    intent: waveformIntentSchema,
  })
  .meta({ id: 'WaveformDocument' });
