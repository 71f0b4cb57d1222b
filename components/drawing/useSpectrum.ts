import { useEffect, useState } from 'react';
import { createSynthesis, createWelch, log10, welchSegment, type Spectrum, type WaveformContent } from '@/lib/synth';
import type { SpectrumLine } from './SpectrumTrace';

const blockSamples = 8192;
/** Enough for a quiet line; a longer vector is shown by its beginning. */
const samplesMost = 1 << 18;

/** Densities in dB over that of a 0 dB cell, 1/(N·Δf). */
export function spectrumLine(name: string, spectrum: Spectrum, content: WaveformContent, dashed = false): SpectrumLine {
  const spacingHz = content.subcarrierSpacingHz[0] / content.subcarrierSpacingHz[1];
  const cell = 1 / (content.fftSize * spacingHz);
  const densityDb = Float64Array.from(spectrum.density, (value) => (value > 0 ? 10 * log10(value / cell) : -300));
  return {
    name,
    fromHz: -Math.floor(densityDb.length / 2) * spectrum.binHz,
    stepHz: spectrum.binHz,
    densityDb,
    dashed,
  };
}

/** The spectrum of a content's rendered samples, worked out in slices while the page stays live; null until it is there. */
export function useSpectrum(content: WaveformContent | null, name = 'this', dashed = false): SpectrumLine[] | null {
  const [line, setLine] = useState<{ of: WaveformContent; lines: SpectrumLine[] } | null>(null);
  useEffect(() => {
    if (!content) return;
    let timer: ReturnType<typeof setTimeout>;
    const spacingHz = content.subcarrierSpacingHz[0] / content.subcarrierSpacingHz[1];
    timer = setTimeout(() => {
      const synthesis = createSynthesis(content);
      const samples = Math.min(samplesMost, synthesis.samples);
      const welch = createWelch({
        segmentLength: welchSegment(samples, 4096),
        clockHz: content.fftSize * content.oversampling * spacingHz,
      });
      const block = new Float64Array(2 * blockSamples);
      const slice = () => {
        const count = synthesis.read(block);
        if (count > 0) welch.push(block, count);
        if (count > 0 && synthesis.position < samples) timer = setTimeout(slice, 0);
        else setLine({ of: content, lines: [spectrumLine(name, welch.result(), content, dashed)] });
      };
      slice();
    }, 0);
    return () => clearTimeout(timer);
  }, [content, name, dashed]);
  return line && line.of === content ? line.lines : null;
}
