import { cautions, countedPeakDbfs, levelCard, levelsInDbfs, type LevelMeans, type MeasuredLevels } from '@/lib/synth';
import { documentOf, measuredLevels, wideBench } from '@/tests/helpers/bench';
import { smallContent } from '@/tests/helpers/content';

const content = smallContent({ fftSize: 2048, subcarrierSpacingHz: [15000, 1] });
const INTENT = {
  outputRmsDbm: -22,
  lossDb: 20.6,
  devicePeakLimitDbm: -10,
  deviceMeanLimitDbm: -18,
  levelToleranceDb: 1,
};

function card(means: LevelMeans, intent: object = {}, levels: Partial<MeasuredLevels> = {}, overrides = {}) {
  return levelCard(
    documentOf(content, { ...INTENT, ...intent }),
    wideBench({ levelMeans: means }),
    measuredLevels(levels),
    overrides,
  );
}

describe('worked by hand', () => {
  test('setting is the mean while the frame plays', () => {
    // −22 dBm at the device + 20.6 dB loss; peak 9.05 dB above; min(−10 − 9.05, −18 − 0) + 20.6 − 1 = 0.55, down to 0.5
    const found = card('activeRms');
    expect(found.settingDbm).toBeCloseTo(-1.4, 12);
    expect(found.peakNowDbm).toBeCloseTo(-12.95, 12);
    expect(found.meanNowDbm).toBeCloseTo(-22, 12);
    expect(found.highestSettingDbm).toBe(0.5);
    expect(found.peakWithoutAttenuatorDbm).toBeCloseTo(7.65, 12);
    expect(found.verdict).toBe('inside');
    expect(found.sentence).toBe('2.95 dB left to the peak limit, 4.00 dB to the mean.');
    expect(found.settingWords).toBe('its mean while the frame plays');
    expect(found.sampleClockHz).toBe(30.72e6);
  });

  test('gaps: a setting of the whole file’s mean lies lower for the same active mean', () => {
    // the file's RMS is 3 dB lower: m − r = 3, peak − r = 12.05
    const found = card('fileRms', {}, { fileRmsDbfs: -13.05 });
    expect(found.settingDbm).toBeCloseTo(-4.4, 12);
    expect(found.peakNowDbm).toBeCloseTo(-12.95, 12);
    expect(found.meanNowDbm).toBeCloseTo(-22, 12);
    // min(−10 − 12.05, −18 − 3) + 20.6 − 1 = −2.45, down to −2.5
    expect(found.highestSettingDbm).toBe(-2.5);
  });

  test('setting is a full-scale tone: r = 0 dBFS', () => {
    const found = card('fullScaleTone');
    expect(found.settingDbm).toBeCloseTo(-22 + 10.05 + 20.6, 12);
    expect(found.peakNowDbm).toBeCloseTo(-12.95, 12);
    // min(−10 + 1, −18 + 10.05) + 20.6 − 1 = 10.6
    expect(found.highestSettingDbm).toBe(10.6);
  });

  test('unknown means: three readings, the lowest setting and the highest level count', () => {
    const found = card('unknown', {}, { fileRmsDbfs: -13.05 });
    expect(found.readings.map((reading) => reading.means)).toEqual(['fileRms', 'activeRms', 'fullScaleTone']);
    expect(found.settingDbm).toBeCloseTo(-4.4, 12);
    expect(found.peakNowDbm).toBeCloseTo(-12.95, 12);
    expect(found.highestSettingDbm).toBe(-2.5);
    const typed = card('unknown', {}, { fileRmsDbfs: -13.05 }, { settingDbm: 0 });
    expect(typed.readings.map((reading) => reading.peakNowDbm)).toEqual(
      [-8.55, -11.55, -21.6].map((db) => expect.closeTo(db, 9) as number),
    );
    expect(typed.peakNowDbm).toBeCloseTo(-8.55, 9);
    expect(typed.sentence).toBe('Over by 1.4 dB: do not switch on.');
  });

  test('0 dBm is a level, not a missing one', () => {
    const zero = card('activeRms', { outputRmsDbm: 0, lossDb: 0, devicePeakLimitDbm: 0, deviceMeanLimitDbm: 0 });
    expect(zero.settingDbm).toBe(0);
    expect(zero.peakNowDbm).toBeCloseTo(9.05, 12);
    expect(zero.peakLeftDb).toBeCloseTo(-9.05, 12);
    expect(zero.meanLeftDb).toBeCloseTo(0, 12);
    expect(zero).toMatchObject({ verdict: 'over', sentence: 'Over by 9.1 dB: do not switch on.' });
    expect(zero.highestSettingDbm).toBe(-10.1);
    expect(card('activeRms', {}, {}, { settingDbm: 0 }).settingDbm).toBe(0);
  });

  test('a mean limit alone may be the stricter one', () => {
    const found = card('activeRms', { deviceMeanLimitDbm: -25 });
    expect(found.highestSettingDbm).toBe(-5.4);
    expect(found).toMatchObject({ verdict: 'over', sentence: 'Over by 3.0 dB: do not switch on.' });
  });

  test('no limit given: no highest setting, never green', () => {
    const none = card('activeRms', { devicePeakLimitDbm: null, deviceMeanLimitDbm: null });
    expect(none).toMatchObject({ highestSettingDbm: null, peakLeftDb: null, verdict: 'noLimit' });
    expect(none.sentence).toBe('No peak limit given. Ask before you connect.');
    const mean = card('activeRms', { devicePeakLimitDbm: null });
    expect(mean.verdict).toBe('noLimit');
    expect(mean.highestSettingDbm).toBe(1.6);
    const peak = card('activeRms', { deviceMeanLimitDbm: null });
    expect(peak).toMatchObject({ verdict: 'inside', sentence: '2.95 dB left to the peak limit, no mean limit given.' });
  });

  test('a level that is a whole tenth stays one; tolerance 0', () => {
    const found = card('activeRms', { devicePeakLimitDbm: -10.05, levelToleranceDb: 0, deviceMeanLimitDbm: null });
    // −10.05 − 9.05 + 20.6 = 1.5
    expect(found.highestSettingDbm).toBe(1.5);
  });

  test('at the highest setting, with its tolerance in error, no limit is passed', () => {
    for (let i = 0; i < 200; i++) {
      const limits = { devicePeakLimitDbm: -20 + i * 0.137, deviceMeanLimitDbm: -25 + i * 0.091, lossDb: i * 0.07 };
      for (const means of ['fileRms', 'activeRms', 'fullScaleTone', 'unknown'] as const) {
        const levels = { fileRmsDbfs: -12 - i * 0.01 };
        const highest = card(means, limits, levels).highestSettingDbm!;
        const at = card(means, limits, levels, { settingDbm: highest + 1 });
        expect(at.peakLeftDb!).toBeGreaterThanOrEqual(-1e-9);
        expect(at.meanLeftDb!).toBeGreaterThanOrEqual(-1e-9);
        const above = card(means, limits, levels, { settingDbm: highest + 1.1 + 1e-6 });
        expect(Math.min(above.peakLeftDb!, above.meanLeftDb!)).toBeLessThan(0);
      }
    }
  });

  test('limits entered on the card replace the document’s, null takes one away', () => {
    expect(card('activeRms', {}, {}, { devicePeakLimitDbm: -5 }).peakLeftDb).toBeCloseTo(7.95, 12);
    expect(card('activeRms', {}, {}, { devicePeakLimitDbm: null }).verdict).toBe('noLimit');
    expect(card('activeRms', {}, {}, { lossDb: 30.6 })).toMatchObject({
      lossDb: 30.6,
      settingDbm: expect.closeTo(8.6, 9) as number,
    });
    expect(card('activeRms', {}, {}, { devicePeakLimitDbm: undefined }).peakLimitDbm).toBe(-10);
  });

  test('the larger of rendered and reconstructed peak counts', () => {
    expect(countedPeakDbfs(measuredLevels({ reconstructedPeakDbfs: 0.3 }))).toBe(0.3);
    expect(countedPeakDbfs(measuredLevels({ reconstructedPeakDbfs: null }))).toBe(-1);
    expect(card('activeRms', {}, { reconstructedPeakDbfs: 0 }).peakNowDbm).toBeCloseTo(-11.95, 12);
  });

  test('nothing measured: nothing is claimed', () => {
    const found = card('activeRms', {}, { activeRmsDbfs: null, renderedPeakDbfs: null, reconstructedPeakDbfs: null });
    expect(found).toMatchObject({ settingDbm: null, peakNowDbm: null, highestSettingDbm: null, verdict: 'unknown' });
  });

  test('levels in dBFS: a tone of |x| = F is 0 dBFS, I = Q = F is 3.01', () => {
    const levels = levelsInDbfs({
      fileMeanPower: 1,
      activeMeanPower: 1,
      renderedPeakPower: 2,
      reconstructedPower: 32767 ** 2,
      saturatedComponents: 0,
      scale: 32767,
      fullScale: 32767,
    });
    expect(levels.fileRmsDbfs).toBeCloseTo(0, 12);
    expect(levels.renderedPeakDbfs).toBeCloseTo(3.0103, 4);
    expect(levels.reconstructedPeakDbfs).toBeCloseTo(0, 12);
  });
});

describe('cautions', () => {
  const CONTEXT = { state: 'released', edition: 4, digest: 'sha256:b63d1be93acab0d2', fetched: '12:31' } as const;

  test('eleven, in order, with the card’s numbers', () => {
    const points = cautions(card('activeRms'), CONTEXT);
    expect(points.map((point) => point.number)).toEqual([1, 2, 3, 4, 5, 6, 7, 8, 9, 10, 11]);
    const text = points.map((point) => point.text);
    expect(text[0]).toContain('Highest setting +0.5 dBm, 1.0 dB kept for error');
    expect(text[0]).toContain('its mean while the frame plays');
    expect(text[1]).toContain('Peak now −12.95 dBm');
    expect(text[1]).toContain('2.95 dB left');
    expect(text[2]).toContain('Output off');
    expect(text[3]).toBe('Attenuator first. Without it the peak is +7.7 dBm, over by 17.7 dB.'.replace('+7.7', '+7.7'));
    expect(text[4]).toContain('9.05 dB above the mean');
    expect(text[5]).toContain('unlevelled');
    expect(text[6]).toContain('block DC');
    expect(text[7]).toContain('plus its gain');
    expect(text[8]).toContain('Licence or shielded enclosure');
    expect(text[9]).toBe('Released, edition 4. Digest b63d1be9. Card fetched 12:31.');
    expect(text[10]).toContain('replaces neither');
    expect(points.map((point) => point.severe)).toEqual([
      false,
      false,
      false,
      true,
      false,
      false,
      false,
      false,
      false,
      false,
      false,
    ]);
  });

  test('over a limit, no limit, gaps, a draft', () => {
    const over = cautions(card('activeRms', { outputRmsDbm: -13 }, { fileRmsDbfs: -13.05 }), {
      ...CONTEXT,
      state: 'draft',
      edition: null,
      fetched: null,
    });
    expect(over[1]!.text).toContain('Over by 6.1 dB: do not switch on.');
    expect(over[1]!.severe).toBe(true);
    expect(over[4]!.text).toContain('3.00 dB more in this file');
    expect(over[9]!.text).toBe('Draft: not for the bench. Digest b63d1be9.');
    const none = cautions(card('unknown', { devicePeakLimitDbm: null, deviceMeanLimitDbm: null }), CONTEXT);
    expect(none[0]).toMatchObject({ severe: true, text: expect.stringContaining('No limit given') as string });
    expect(none[0]!.text).toContain(
      'What the setting on the generator means is not known: the highest of three readings counts.',
    );
    expect(none[3]!.text).toContain('no limit is given');
    expect(cautions(card('activeRms'), { ...CONTEXT, state: 'withdrawn' })[9]!.text).toContain('do not use it');
  });
});
