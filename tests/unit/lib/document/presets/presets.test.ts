import { parseWaveformDocument } from '@/lib/document/parse';
import { presetGroups } from '@/lib/document/presets/preset';
import { presets } from '@/lib/document/presets/presets';
import { createSynthesis } from '@/lib/synth/index';

test('every preset has an id and a title of its own, standards first', () => {
  expect(new Set(presets.map(({ presetId }) => presetId)).size).toBe(presets.length);
  expect(new Set(presets.map(({ title }) => title)).size).toBe(presets.length);
  const groups = presets.map(({ group }) => presetGroups.indexOf(group));
  expect(groups).toEqual([...groups].sort());
});

describe.each(presets.map((preset) => [preset.presetId, preset] as const))('%s', (_id, preset) => {
  test('is a right document that cites its source and says what it leaves out', () => {
    const document = preset.build();
    expect(parseWaveformDocument(JSON.stringify(document))).toEqual({ ok: true, value: document });
    expect(document.about.title).toBe(preset.title);
    expect(document.content).toMatchObject({ ...preset.numbers, oversampling: 1 });
    expect(document.content.level).toEqual({ reference: 'interpolatedPeak', headroomDb: 1 });
    for (const left of preset.leftOut) expect(document.about.notes).toContain(left);
    if (preset.group === 'Bench basics') {
      expect(document.about.basedOn).toBeNull();
      expect(preset.basedOn).toBe('Common practice, no source');
    } else {
      expect(document.about.basedOn).toBe(preset.basedOn);
      expect(preset.leftOut.length).toBeGreaterThan(0);
      expect(document.content.streams.every(({ fill }) => fill === 'running')).toBe(true);
      if (preset.fromMemory !== null) expect(document.about.notes).toContain(preset.fromMemory);
    }
  });

  test('is built once', () => {
    expect(preset.build()).toBe(preset.build());
  });

  test('renders: samples are finite, and their energy is that of the cells', () => {
    const { content } = preset.build();
    const synthesis = createSynthesis(content, { oversampling: 1 });
    const block = new Float64Array(2 * 65536);
    let energy = 0;
    let samples = 0;
    for (let read = synthesis.read(block); read > 0; read = synthesis.read(block)) {
      samples += read;
      for (let at = 0; at < 2 * read; at += 1) energy += block[at]! * block[at]!;
    }
    expect(samples).toBe(synthesis.samples);
    expect(energy).toBeGreaterThan(0);
    expect(Number.isFinite(energy)).toBe(true);
  });
});
