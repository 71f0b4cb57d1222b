import { layoutRefusals } from '@/lib/synth/index';
import { z } from './zod';
import { customIssue } from './issues';
import { freeText, lineText, list, real, whole } from './schemaParts';

const clockHz = z.number().gt(0).max(1e13);
const samples40 = whole(1, 2 ** 40);

const mode = z.enum(['loop', 'burst']);

const markers = z
  .strictObject({
    count: whole(0, 8),
    packing: z.enum(['none', 'bytes', 'lowBits']),
    leastSamples: samples40,
    stepSamples: samples40,
  })
  .check((payload) => {
    if (payload.issues.length > 0) return;
    const { count, packing } = payload.value;
    if ((count === 0) === (packing === 'none')) return;
    const text =
      count === 0 ? 'must be "none" without markers' : 'must be "bytes" or "lowBits" where markers are counted';
    payload.issues.push(customIssue(['packing'], text, undefined));
  });

/** The limits and the byte layout of one generator: layouts that no file can have are refused in lib/synth's words. */
export const benchContentSchema = z
  .strictObject({
    sampleClockHz: z.strictObject({ least: clockHz, most: clockHz, step: clockHz.nullable() }),
    word: z.enum(['int8', 'int16', 'float32']),
    bits: whole(8, 16),
    align: z.enum(['left', 'right']),
    numberFormat: z.enum(['twosComplement', 'offsetBinary']),
    byteOrder: z.enum(['little', 'big']),
    layout: z.enum(['interleaved', 'split']),
    container: z.enum(['raw', 'wav', 'npy', 'csv']),
    swapIq: z.boolean(),
    negateQ: z.boolean(),
    granularitySamples: whole(1, 2 ** 20),
    leastSamples: samples40,
    mostSamples: samples40,
    leastHeadroomDb: real(0, 60),
    levelMeans: z.enum(['fileRms', 'activeRms', 'fullScaleTone', 'unknown']),
    markers,
    modes: list(mode, 1, 2),
    fileName: z.strictObject({
      most: whole(20, 64),
      extension: z.string().regex(/^[a-z0-9-]{1,16}$/, 'must be 1 to 16 of the characters a to z, 0 to 9 and -'),
    }),
  })
  .check((payload) => {
    if (payload.issues.length > 0) return;
    const { value } = payload;
    const add = (path: string[], text: string) => payload.issues.push(customIssue(path, text, undefined));
    const { least, most } = value.sampleClockHz;
    if (least > most) add(['sampleClockHz', 'least'], `must be at most the highest clock, ${most}`);
    if (value.leastSamples > value.mostSamples)
      add(['leastSamples'], `must be at most mostSamples, ${value.mostSamples}`);
    if (value.modes.length === 2 && !(value.modes[0] === 'loop' && value.modes[1] === 'burst')) {
      add(['modes'], 'must be in the order loop, burst, each once');
    }
    if (value.word === 'int8' && value.bits !== 8) add(['bits'], 'must be 8 with int8 words');
    if (value.word === 'float32' && value.bits !== 16) add(['bits'], 'must be 16 with float32 words');
    if (value.word !== 'int16' && value.align !== 'right') add(['align'], `must be "right" with ${value.word} words`);
    if (value.word === 'float32' && value.numberFormat !== 'twosComplement') {
      add(['numberFormat'], 'must be "twosComplement" with float32 words');
    }
    if (
      value.markers.packing === 'lowBits' &&
      (value.word !== 'int16' || value.align !== 'left' || value.bits === 16)
    ) {
      add(['markers', 'packing'], 'must not be "lowBits": that needs left-aligned int16 words with free low bits');
    }
    for (const { path, words } of layoutRefusals(value)) add(path, words);
  })
  .meta({ id: 'BenchContent' });

export const benchProfileSchema = z
  .strictObject({
    format: z.literal('combwright.bench'),
    version: z.literal(1),
    about: z.strictObject({ name: lineText(1, 120), notes: freeText(4000) }),
    content: benchContentSchema,
  })
  .meta({ id: 'BenchProfile' });
