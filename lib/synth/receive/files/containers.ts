import { plainLayout, type LayoutOutcome } from './captureLayout';

const textAt = (bytes: Uint8Array, at: number, length: number): string =>
  String.fromCharCode(...bytes.subarray(at, at + length));

const refuse = (message: string): LayoutOutcome => ({ ok: false, message });

/** True for a file that begins as RIFF with WAVE in it. */
export function isWav(head: Uint8Array): boolean {
  return head.length >= 12 && textAt(head, 0, 4) === 'RIFF' && textAt(head, 8, 4) === 'WAVE';
}

const PCM = 1;
const FLOAT = 3;
const EXTENSIBLE = 0xfffe;

/**
 * A WAV file's words: chunks are walked until data, two channels of 8- or 16-bit integers or 32-bit floats are taken. `head`: the file's first
 * bytes (64 KiB are plenty). Source: Multimedia Programming Interface and Data Specifications 1.0, and its WAVE_FORMAT_EXTENSIBLE (from memory).
 */
export function readWavHead(head: Uint8Array): LayoutOutcome {
  const view = new DataView(head.buffer, head.byteOffset, head.length);
  let format: { tag: number; channels: number; clockHz: number; bits: number } | null = null;
  for (let at = 12; at + 8 <= head.length;) {
    const name = textAt(head, at, 4);
    const bytes = view.getUint32(at + 4, true);
    const body = at + 8;
    if (name === 'fmt ' && body + 16 <= head.length) {
      let tag = view.getUint16(body, true);
      if (tag === EXTENSIBLE && bytes >= 40 && body + 26 <= head.length) tag = view.getUint16(body + 24, true);
      format = {
        tag,
        channels: view.getUint16(body + 2, true),
        clockHz: view.getUint32(body + 4, true),
        bits: view.getUint16(body + 14, true),
      };
    }
    if (name === 'data') {
      if (format === null) return refuse('The WAV file has no format before its data.');
      const { tag, channels, bits, clockHz } = format;
      if (channels !== 2)
        return refuse(`The WAV file has ${channels} ${channels === 1 ? 'channel' : 'channels'}; I and Q take two.`);
      const isFloat = tag === FLOAT && bits === 32;
      if (!isFloat && !(tag === PCM && (bits === 8 || bits === 16)))
        return refuse(`The WAV file has ${bits}-bit words of type ${tag}; 8 and 16 bits and 32-bit floats are read.`);
      return {
        ok: true,
        clockHz: clockHz > 0 ? clockHz : null,
        layout: {
          ...plainLayout,
          container: 'wav',
          word: isFloat ? 'float32' : bits === 8 ? 'int8' : 'int16',
          bits: isFloat ? 16 : bits,
          numberFormat: bits === 8 ? 'offsetBinary' : 'twosComplement',
          headBytes: body,
          // writers that stream leave 0 or the largest number
          dataBytes: bytes === 0 || bytes === 0xffffffff ? null : bytes,
        },
      };
    }
    at = body + bytes + (bytes % 2);
  }
  return refuse('The WAV file has no data.');
}

/** True for a file that begins as NumPy's. */
export function isNpy(head: Uint8Array): boolean {
  return head.length >= 10 && head[0] === 0x93 && textAt(head, 1, 5) === 'NUMPY';
}

/**
 * A .npy file's words: C order, shape [samples, 2] of i1, u1, i2, u2, f4, or [samples] of c8; with `isSplit` [samples] of words. Source:
 * numpy.lib.format, versions 1 to 3.
 */
export function readNpyHead(head: Uint8Array, isSplit = false): LayoutOutcome {
  const isLong = head[6]! >= 2;
  const fixed = isLong ? 12 : 10;
  if (head.length < fixed) return refuse('The NumPy file ends in its head.');
  const view = new DataView(head.buffer, head.byteOffset, head.length);
  const length = isLong ? view.getUint32(8, true) : view.getUint16(8, true);
  if (fixed + length > head.length) return refuse('The NumPy file ends in its head.');
  const text = textAt(head, fixed, length);
  const type = /'descr':\s*'([<>|=]?)([a-z])(\d+)'/.exec(text);
  const shape = /'shape':\s*\(([^)]*)\)/
    .exec(text)?.[1]
    ?.split(',')
    .map((part) => part.trim())
    .filter((part) => part !== '');
  if (!type || !shape) return refuse('The NumPy file holds no plain numbers.');
  if (/'fortran_order':\s*True/.test(text)) return refuse('The NumPy file is in Fortran order; C order is read.');
  const kind = `${type[2]}${type[3]}`;
  const word = ({ i1: 'int8', u1: 'int8', i2: 'int16', u2: 'int16', f4: 'float32', c8: 'float32' } as const)[
    kind as 'i1'
  ] as 'int8' | 'int16' | 'float32' | undefined;
  if (word === undefined)
    return refuse(`The NumPy file has items of type ${kind}; i1, u1, i2, u2, f4 and c8 are read.`);
  const isComplex = kind === 'c8';
  const isRow = shape.length === 2 && shape[1] === '2';
  if (!(isComplex ? shape.length === 1 : isRow || (isSplit && shape.length === 1)))
    return refuse(
      `The NumPy file has the shape (${shape.join(', ')}); (samples, 2), or (samples) of complex64, is read.`,
    );
  return {
    ok: true,
    clockHz: null,
    layout: {
      ...plainLayout,
      container: 'npy',
      word,
      bits: word === 'int8' ? 8 : 16,
      numberFormat: type[2] === 'u' ? 'offsetBinary' : 'twosComplement',
      byteOrder: type[1] === '>' ? 'big' : 'little',
      layout: isSplit && !isComplex && !isRow ? 'split' : 'interleaved',
      headBytes: fixed + length,
    },
  };
}

/**
 * A SigMF recording's words from its metadata (text of the .sigmf-meta file): complex types of 8, 16 bits and 32-bit floats, one channel.
 * Source: SigMF specification 1.0, core namespace.
 */
export function readSigmfMeta(text: string): LayoutOutcome {
  let meta: unknown;
  try {
    meta = JSON.parse(text);
  } catch {
    return refuse('The metadata is no JSON.');
  }
  const global = (meta as { global?: Record<string, unknown> } | null)?.global;
  if (typeof global !== 'object' || global === null) return refuse('The metadata has no global part.');
  const type = global['core:datatype'];
  if (typeof type !== 'string') return refuse('The metadata names no datatype.');
  const parts = /^c(i8|u8|i16|u16|f32)(?:_(le|be))?$/.exec(type);
  if (!parts) return refuse(`The recording's type is ${type.slice(0, 20)}; ci8, cu8, ci16, cu16 and cf32 are read.`);
  const channels = global['core:num_channels'] ?? 1;
  if (channels !== 1) return refuse('The recording has several channels; one is read.');
  const rate = global['core:sample_rate'];
  const captures = (meta as { captures?: unknown }).captures;
  const first: unknown = Array.isArray(captures) ? captures[0] : undefined;
  const head = (first as Record<string, unknown> | undefined)?.['core:header_bytes'];
  const word = parts[1] === 'f32' ? 'float32' : parts[1]!.endsWith('16') ? 'int16' : 'int8';
  return {
    ok: true,
    clockHz: typeof rate === 'number' && rate > 0 ? rate : null,
    layout: {
      ...plainLayout,
      word,
      bits: word === 'int8' ? 8 : 16,
      numberFormat: parts[1]!.startsWith('u') ? 'offsetBinary' : 'twosComplement',
      byteOrder: parts[2] === 'be' ? 'big' : 'little',
      headBytes: typeof head === 'number' && Number.isInteger(head) && head >= 0 ? head : 0,
    },
  };
}
