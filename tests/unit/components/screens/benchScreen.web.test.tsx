import { QueryClient, QueryClientProvider } from '@tanstack/react-query';
import { fireEvent, render, screen } from '@testing-library/react';
import { useState, type ReactNode } from 'react';
import { BenchForm } from '@/components/screens/BenchScreen/BenchForm';
import { BytePicture } from '@/components/screens/BenchScreen/BytePicture';
import { newBenchContent, whyNot, withContainer, withWord } from '@/components/screens/BenchScreen/fields';
import { firstWords, rampContent, rampSamples } from '@/components/screens/BenchScreen/firstWords';
import { SidednessNote } from '@/components/screens/BenchScreen/SidednessNote';
import { bitWords } from '@/components/screens/BenchScreen/WordBits';
import { keyOf } from '@/lib/client/useApi';
import { listWaveforms, showRevision } from '@/lib/contracts/waveforms';
import type { BenchContent, BenchProfile } from '@/lib/synth';
import { smallDocument } from '@/tests/helpers/documents';

const revisionId = '01M8SBJNN8EPEZRKZXJR2YSA8N';

/** The page as it stands once an edition and its document have been read. */
function show(page: ReactNode) {
  const queries = new QueryClient({ defaultOptions: { queries: { retry: false, staleTime: Infinity } } });
  const items = [{ title: 'Ladder', newestEdition: { number: 4, revisionId } }];
  queries.setQueryData(keyOf(listWaveforms, { query: {} }), { items });
  queries.setQueryData(keyOf(showRevision, { params: { revisionId } }), { document: smallDocument() });
  return render(<QueryClientProvider client={queries}>{page}</QueryClientProvider>);
}

const lowBits = { count: 4, packing: 'lowBits', leastSamples: 1, stepSamples: 1 } as const;
const bench = (overrides: Partial<BenchContent>): BenchContent => ({ ...newBenchContent, ...overrides });
const profile = (content: BenchContent): BenchProfile => ({
  format: 'combwright.bench',
  version: 1,
  about: { name: 'Bench C', notes: '' },
  content,
});

describe('choices of a layout', () => {
  function Form({ start, seen }: { start: BenchContent; seen: (content: BenchContent) => void }) {
    const [now, setNow] = useState(profile(start));
    return (
      <BenchForm
        profile={now}
        onChange={(next) => {
          setNow(next);
          seen(next.content);
        }}
        errors={{}}
        warnings={[]}
        onTyping={jest.fn()}
        readOnly={false}
      />
    );
  }

  it('say why where they are chosen, and change nothing', () => {
    const seen = jest.fn();
    show(<Form start={bench({ container: 'wav' })} seen={seen} />);
    for (const [word, why] of [
      ['two files', 'I and Q are the two channels of one WAV file.'],
      ['high first', 'WAV stores the low byte first.'],
      ['offset', '16-bit words in WAV are signed.'],
      ['CSV', 'CSV holds decimal numbers, full scale 1.0, which are floats.'],
      ['low bits', 'There is no marker.'],
    ]) {
      fireEvent.click(screen.getByText(word!));
      expect(screen.getByText(why!)).toBeInTheDocument();
    }
    expect(seen).not.toHaveBeenCalled();
  });

  it('take along what a container leaves no choice of', () => {
    const byte = withWord(bench({ byteOrder: 'big' }), 'int8');
    expect(withContainer(byte, 'wav')).toMatchObject({ byteOrder: 'little', numberFormat: 'offsetBinary' });
    expect(withWord(withContainer(byte, 'wav'), 'int16')).toMatchObject({ numberFormat: 'twosComplement' });
    expect(withContainer(byte, 'npy')).toMatchObject({ byteOrder: 'big', numberFormat: 'twosComplement' });
    expect(whyNot(bench({ markers: lowBits }))).toContain('left-aligned 16-bit words');
    expect(whyNot(bench({ markers: lowBits, align: 'left', bits: 14 }))).toBeNull();
  });
});

describe('the first words', () => {
  const ramp = (content: BenchContent) => firstWords(content, rampContent(content), rampSamples(content), 1)!;
  const bytesOf = (content: BenchContent) =>
    ramp(content).files.map((file) => file.words.flatMap(({ bytes }) => bytes).map((byte) => byte.toString(16)));

  it('are sixteen bytes of each file, in the file’s order', () => {
    expect(bytesOf(bench({}))[0]).toEqual('1 0 ff ff 2 0 fe ff 3 0 fd ff 4 0 fc ff'.split(' '));
    const swapped = ramp(bench({ swapIq: true, negateQ: true })).files[0]!.words;
    expect(swapped.slice(0, 4).map(({ name, value }) => [name, value])).toEqual([
      ['Q', 1],
      ['I', 1],
      ['Q', 2],
      ['I', 2],
    ]);
    const split = ramp(bench({ layout: 'split', byteOrder: 'big' })).files;
    expect(split.map(({ ending, words }) => [ending, words.length, words[1]!.name, words[1]!.bytes])).toEqual([
      ['-i', 8, 'I', [0, 2]],
      ['-q', 8, 'Q', [255, 254]],
    ]);
    expect(ramp(bench({ container: 'wav' })).files[0]!.headBytes).toBe(44);
  });

  it('carry each marker’s own bit', () => {
    const low = bench({ bits: 14, align: 'left', markers: lowBits });
    // value·4 with bits 0 and 1 of the first word for markers 1 and 2, of the second for 3 and 4
    expect(bytesOf(low)[0]!.slice(0, 12)).toEqual('5 0 fc ff a 0 f8 ff c 0 f5 ff'.split(' '));
    expect(ramp(low).markers.slice(0, 5)).toEqual([1, 2, 4, 8, 0]);
  });

  it('of text are lines', () => {
    expect(ramp(bench({ word: 'float32', container: 'csv' })).files[0]!.lines!.slice(0, 2)).toEqual([
      'I,Q',
      '+2.50000000e-01,-2.50000000e-01',
    ]);
  });

  it('say which bits are the number’s', () => {
    const one = (content: BenchContent) => bitWords(content, ramp(content).files[0]!.words[0]!);
    expect(one(bench({}))).toBe('together 1: two’s complement, sign in bit 15');
    expect(one(bench({ bits: 12, align: 'left' }))).toBe(
      'together 1: two’s complement, the number in bits 15 to 4, sign in bit 15; bits 3 to 0 free, always 0',
    );
    expect(one(bench({ bits: 12 }))).toContain('sign in bit 11; bits 15 to 12 as the sign');
    expect(one(bench({ bits: 12, numberFormat: 'offsetBinary' }))).toContain(
      'offset binary, 2048 more than the number, the number in bits 11 to 0; bits 15 to 12 always 0',
    );
    expect(one(bench({ bits: 15, align: 'left', markers: { ...lowBits, count: 1 } }))).toContain('bit 0 holds markers');
  });

  it('are drawn of a ramp, then of the edition that was chosen, with its levels', async () => {
    show(<BytePicture content={bench({ markers: { ...lowBits, packing: 'bytes' } })} />);
    expect(screen.getByText(/the value 1 is stored 01 00, and −1 is stored FF FF/)).toBeInTheDocument();
    expect(screen.getByText(/bit 0 is marker 1; bit 1 is marker 2/)).toBeInTheDocument();
    fireEvent.change(screen.getByLabelText('Then an edition'), { target: { value: revisionId } });
    expect(await screen.findByText('as its pack begins', { exact: false })).toBeInTheDocument();
    expect(screen.getByText(/peak between samples −1\.00 dBFS\. Nothing saturates\./)).toBeInTheDocument();
    expect(screen.getByText('This waveform has none: every bit is 0.')).toBeInTheDocument();
  });

  it('are not drawn where no file can be, and it says why', () => {
    show(<BytePicture content={bench({ container: 'wav', layout: 'split' })} />);
    expect(screen.getByText('I and Q are the two channels of one WAV file.')).toBeInTheDocument();
  });
});

it('the sidedness pack is one press away, of the version that is saved', () => {
  show(<SidednessNote benchId={revisionId} version={3} profile={profile(bench({}))} changed />);
  expect(screen.getByText(/the tone stands 2 MHz above the carrier/)).toBeInTheDocument();
  expect(screen.getByText('Download sidedness pack').closest('a')).toHaveAttribute(
    'href',
    `/api/v1/benches/${revisionId}/sidedness?version=3`,
  );
  expect(screen.getByText('Of version 3, without the changes that are not saved yet.')).toBeInTheDocument();
});
