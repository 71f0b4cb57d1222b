import type { z } from 'zod';
import { benchProfileSchema } from '@/lib/document/benchSchema';
import { inkSchema } from '@/lib/document/inkSchema';
import { payloadSourceSchema, sequenceSchema } from '@/lib/document/sourceSchema';
import { waveformDocumentSchema } from '@/lib/document/waveformSchema';
import type { BenchProfile, Ink, PayloadSource, Sequence, WaveformDocument } from '@/lib/synth/index';

/** True only for types that are the same both ways, optional and readonly marks included. */
type IsSame<A, B> = (<T>() => T extends A ? 1 : 2) extends <T>() => T extends B ? 1 : 2 ? true : false;
/** Spreads intersections out, so that two spellings of one shape compare equal. */
type Flat<T> = T extends (infer E)[]
  ? number extends T['length']
    ? Flat<E>[]
    : { [K in keyof T]: Flat<T[K]> }
  : T extends object
    ? { [K in keyof T]: Flat<T[K]> }
    : T;
type Matches<S extends z.ZodType, T> = IsSame<Flat<z.output<S>>, Flat<T>>;

// The assignments are the test: tsc refuses `true` where a schema and its plain type differ.
const sequenceIsSame: Matches<typeof sequenceSchema, Sequence> = true;
const sourceIsSame: Matches<typeof payloadSourceSchema, PayloadSource> = true;
const inkIsSame: Matches<typeof inkSchema, Ink> = true;
const documentIsSame: Matches<typeof waveformDocumentSchema, WaveformDocument> = true;
const benchIsSame: Matches<typeof benchProfileSchema, BenchProfile> = true;
// and the comparison itself can fail
const optionalDiffers: IsSame<Flat<{ a?: number }>, Flat<{ a: number }>> = false;
const unionDiffers: IsSame<Flat<{ a: 'x' | 'y' }>, Flat<{ a: 'x' }>> = false;

test('schemas and plain types are the same', () => {
  expect([sequenceIsSame, sourceIsSame, inkIsSame, documentIsSame, benchIsSame]).toEqual([
    true,
    true,
    true,
    true,
    true,
  ]);
  expect([optionalDiffers, unionDiffers]).toEqual([false, false]);
});
