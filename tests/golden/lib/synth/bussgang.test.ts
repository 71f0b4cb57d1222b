import type { WaveformContent } from '@/lib/synth';
import { describeCheck } from '../../../helpers/checks';
import { NULL_INK, dataInk, pnStream, smallContent } from '../../../helpers/content';
import { renderSamples } from '../../../helpers/renderWords';

interface Limited {
  complex_alpha: number;
  complex_out_power: number;
  complex_sdr_db: number;
  prob_clipped_complex: number;
}

/** Every subcarrier loaded: samples of a complex Gaussian of unit power, as nearly as 1024 independent ones make it. */
const loaded: WaveformContent = smallContent({
  fftSize: 1024,
  symbolCount: 400,
  tray: [NULL_INK, dataInk(1, { constellation: '64qam', bitMap: 'ts38211', streamId: 's0' })],
  streams: [pnStream(0, { source: { kind: 'gold', cInit: 4242 } })],
  grid: { rows: [[1024, 1]], rowOfSymbol: new Array<number>(400).fill(0) },
});

describeCheck<Record<string, Limited>>('th.bussgang', (check) => {
  const samples = renderSamples(loaded);
  let power = 0;
  for (const part of samples) power += part * part;
  const sigma = Math.sqrt(power / (samples.length / 2));

  // the envelope of the rendered samples limited plainly: what a clipping pass is held against
  it.each([3, 4, 5, 6, 7])('a limiter %i dB above the RMS', (aboveDb) => {
    const expected = check.expected[aboveDb]!;
    const limit = sigma * 10 ** (aboveDb / 20);
    let cross = 0;
    let out = 0;
    let limited = 0;
    for (let i = 0; i < samples.length; i += 2) {
      const magnitude = Math.hypot(samples[i]!, samples[i + 1]!);
      const kept = Math.min(magnitude, limit);
      cross += kept * magnitude;
      out += kept * kept;
      if (magnitude > limit) limited++;
    }
    const alpha = cross / power;
    const distortion = out / power - alpha * alpha;
    expect(Math.abs(alpha - expected.complex_alpha)).toBeLessThan(1e-3);
    expect(Math.abs(out / power - expected.complex_out_power)).toBeLessThan(2e-3);
    expect(Math.abs(10 * Math.log10((alpha * alpha) / distortion) - expected.complex_sdr_db)).toBeLessThan(0.3);
    expect(Math.abs(limited / (samples.length / 2) / expected.prob_clipped_complex - 1)).toBeLessThan(0.1);
  });
});
