import { csvHead, npyHead, npyType, wavHead } from '@/lib/synth/files/fileHeads';
import { openBench } from '@/tests/helpers/documents';

const text = (bytes: Uint8Array) => Buffer.from(bytes).toString('latin1');
const { content: plain } = openBench();

// Multimedia Programming Interface and Data Specifications 1.0 (RIFF), field by field, from memory
test('a WAV head of integers', () => {
  const head = Buffer.from(wavHead(plain, 1000, 30_720_000.4));
  expect([head.length, text(head.subarray(0, 4)), text(head.subarray(8, 16))]).toEqual([44, 'RIFF', 'WAVEfmt ']);
  expect(head.readUInt32LE(4)).toBe(36 + 4000);
  expect([16, 20, 22].map((at) => head.readUInt16LE(at))).toEqual([16, 1, 2]);
  expect([head.readUInt32LE(24), head.readUInt32LE(28)]).toEqual([30_720_000, 122_880_000]);
  expect([head.readUInt16LE(32), head.readUInt16LE(34)]).toEqual([4, 16]);
  expect([text(head.subarray(36, 40)), head.readUInt32LE(40)]).toEqual(['data', 4000]);
});

test('a WAV head of floats counts its samples; a byte rate beyond 32 bits stands as the largest', () => {
  const head = Buffer.from(wavHead({ word: 'float32' }, 10, 2e9));
  expect([head.length, head.readUInt16LE(16), head.readUInt16LE(20)]).toEqual([58, 18, 3]);
  expect([text(head.subarray(38, 42)), head.readUInt32LE(46)]).toEqual(['fact', 10]);
  expect([head.readUInt32LE(24), head.readUInt32LE(28)]).toEqual([2e9, 2 ** 32 - 1]);
});

test('a .npy head says type and shape, and is a multiple of 64 bytes', () => {
  for (const samples of [1, 12345, 2 ** 33]) {
    const head = npyHead(plain, samples);
    expect(head.length % 64).toBe(0);
    expect(text(head.subarray(0, 8))).toBe('\x93NUMPY\x01\x00');
    expect(Buffer.from(head).readUInt16LE(8)).toBe(head.length - 10);
    expect(text(head)).toContain(`{'descr': '<i2', 'fortran_order': False, 'shape': (${samples}, 2), }`);
    expect(head.at(-1)).toBe(0x0a);
  }
  const float = { ...plain, word: 'float32' as const };
  expect(text(npyHead(float, 5))).toContain("'<c8', 'fortran_order': False, 'shape': (5,)");
  expect(text(npyHead({ ...float, negateQ: true }, 5))).toContain("'<f4', 'fortran_order': False, 'shape': (5, 2)");
  expect(text(npyHead({ ...float, layout: 'split', byteOrder: 'big' }, 5))).toContain("'>f4'");
  expect(npyType({ ...plain, word: 'int8', numberFormat: 'offsetBinary' })).toBe('|u1');
  expect(npyType({ ...plain, byteOrder: 'big' })).toBe('>i2');
});

test('a CSV head is one line', () => {
  expect(text(csvHead(['I', 'Q']))).toBe('I,Q\n');
  expect(text(csvHead(['Q']))).toBe('Q\n');
});
