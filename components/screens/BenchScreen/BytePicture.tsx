import { useState } from 'react';
import { StyleSheet, View } from 'react-native';
import { ChoiceField } from '@/components/ui/ChoiceField';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import { formatNumber } from '@/lib/drawing/quantities';
import { vectorRefusals, wordScale, type BenchContent, type WaveformContent } from '@/lib/synth';
import { fullScaleText, whyNot } from './fields';
import { firstWords, rampContent, rampSamples, shownSamples, type FirstWords } from './firstWords';
import { MarkerRow } from './MarkerRow';
import { useEditionChoices, useEditionStart, type EditionStart } from './useEditionStart';
import { WordBits } from './WordBits';
import { hex, numberOf, WordRow } from './WordRow';

const headWords: Record<BenchContent['container'], string> = {
  raw: '',
  wav: 'a WAV header',
  npy: 'a .npy header',
  csv: 'a header line',
};

/** What is seen here, in one sentence. */
function layoutWords(bench: BenchContent, words: FirstWords): string {
  const [first, second] = bench.swapIq ? ['Q', 'I'] : ['I', 'Q'];
  const order =
    bench.layout === 'split' ? `${first} in one file, ${second} in another` : `each sample ${first} then ${second}`;
  const { headBytes } = words.files[0]!;
  const head = headBytes > 0 ? `, behind ${headWords[bench.container]} of ${headBytes} bytes` : '';
  return `As this profile writes them: ${order}${bench.negateQ ? ', Q negated' : ''}${head}.`;
}

/** The bytes of two numbers, as they would be said to somebody at the generator. */
function storedWords(bench: BenchContent, words: FirstWords): string | null {
  if (bench.container === 'csv') return null;
  const all = words.files.flatMap((file) => file.words);
  const one = all[0]!;
  const other = all.find(({ value }) => value < 0 !== one.value < 0) ?? all[1]!;
  const said = (word: typeof one) => `${numberOf(bench, word.value)} is stored ${word.bytes.map(hex).join('\u00a0')}`;
  const order = one.bytes.length === 1 ? 'One byte' : bench.byteOrder === 'little' ? 'Little-endian' : 'Big-endian';
  return `${order}: the value ${said(one)}, and ${said(other)}.`;
}

function Section({
  title,
  rest,
  bench,
  words,
}: {
  title: string;
  rest: string;
  bench: BenchContent;
  words: FirstWords;
}) {
  return (
    <View style={styles.section}>
      <Text variant="small">
        <Text variant="small" weight={600} tone="strong">
          {title}
        </Text>{' '}
        {rest}
      </Text>
      {words.files.map((file) => (
        <WordRow key={file.ending} bench={bench} file={file} />
      ))}
    </View>
  );
}

/** The beginning of the vector, drawn byte by byte: of a ramp, and of an edition that somebody chose. */
export function BytePicture({ content: bench }: { content: BenchContent }) {
  const choices = useEditionChoices();
  const [chosenId, setChosenId] = useState('');
  const chosen = choices.find(({ revisionId }) => revisionId === chosenId) ?? null;
  const edition = useEditionStart(chosen);
  const stand = rampContent(bench);
  const ramp = firstWords(bench, stand, rampSamples(bench), 1);
  if (!ramp)
    return (
      <View style={styles.sheet}>
        <Text variant="heading" heading={2} tone="strong">
          First 16 bytes
        </Text>
        <Text tone="quiet">{whyNot(bench) ?? 'No file can have this layout: mend the fields first.'}</Text>
      </View>
    );
  const stored = storedWords(bench, ramp);
  const start = edition.kind === 'there' ? edition.start : null;
  const own = start ? ownWords(bench, start) : null;
  const shown = own?.words ?? ramp;
  const word = shown.files[0]?.words[0];
  const shownContent: WaveformContent = own?.words ? start!.content : stand;
  return (
    <View style={styles.sheet}>
      <Text variant="heading" heading={2} tone="strong">
        {bench.container === 'csv' ? 'First lines' : 'First 16 bytes'}
      </Text>
      <Text variant="small" tone="quiet">
        {layoutWords(bench, ramp)}
      </Text>
      <Section title="A ramp" rest="I counts up, Q counts down" bench={bench} words={ramp} />
      {stored === null ? null : <Text variant="small">{stored}</Text>}
      {choices.length > 0 ? (
        <ChoiceField
          label="Then an edition"
          value={chosen ? chosenId : ''}
          choices={[
            { value: '', label: 'none' },
            ...choices.map(({ revisionId, label }) => ({ value: revisionId, label })),
          ]}
          onChange={setChosenId}
        />
      ) : null}
      {edition.kind === 'measuring' ? (
        <Text variant="small" tone="quiet" role="status">
          Measuring the edition…
        </Text>
      ) : null}
      {edition.kind === 'refused' ? (
        <Text variant="small" tone="warning" role="status">
          {edition.words}
        </Text>
      ) : null}
      {own && !own.words ? (
        <Text variant="small" tone="warning" role="status">
          {own.refusal}
        </Text>
      ) : null}
      {own?.words ? <Section title={start!.label} rest="as its pack begins" bench={bench} words={own.words} /> : null}
      {word && bench.container !== 'csv' ? (
        <View style={styles.section}>
          <Text variant="small" weight={600} tone="strong">
            {`One word, the first ${word.name} of ${own?.words ? 'the edition' : 'the ramp'}`}
          </Text>
          <WordBits bench={bench} word={word} />
        </View>
      ) : null}
      <MarkerRow
        bench={bench}
        markers={shown.markers}
        names={shownContent.markers.map(({ name }) => name)}
        note={own?.words ? '' : ', each on at one sample'}
      />
      <View style={styles.foot}>
        <Text variant="small">
          {own?.words ? levelWords(bench, start!, own.scale) : `Full scale ${fullScaleText(bench)}.`}
        </Text>
        <Text variant="small" tone="quiet">
          Take every limit from the generator’s manual.
        </Text>
      </View>
    </View>
  );
}

function ownWords(bench: BenchContent, start: EditionStart) {
  const { content, levels, samples } = start;
  const { scale, isSilent } = wordScale(content.level, levels, bench);
  if (isSilent) return { words: null, scale, refusal: 'Nothing is painted in this edition.' };
  const first = samples.subarray(0, 2 * shownSamples(bench));
  const words = firstWords(bench, content, first, scale);
  return { words, scale, refusal: vectorRefusals(content, bench)[0]?.reason ?? 'This edition has no such file.' };
}

function levelWords(bench: BenchContent, { levels }: EditionStart, scale: number): string {
  const fullScale = bench.word === 'float32' ? 1 : 2 ** (bench.bits - 1) - 1;
  const dbfs = (level: number) => `${formatNumber(20 * Math.log10((level * scale) / fullScale), 2, true)} dBFS`;
  const isOver = levels.componentPeak * scale > fullScale + (bench.word === 'float32' ? 0 : 0.5);
  const over = bench.word === 'float32' ? 'Some components pass 1.0.' : 'Some samples saturate.';
  return `Full scale ${fullScaleText(bench)}. Mean of the edition ${dbfs(levels.rms)}, peak between samples ${dbfs(levels.interpolatedPeak)}. ${isOver ? over : 'Nothing saturates.'}`;
}

const styles = StyleSheet.create({
  sheet: {
    gap: 12,
    padding: 16,
    borderWidth: 1.5,
    borderColor: color.rule.strong,
    backgroundColor: color.surface.sheet,
  },
  section: { gap: 6 },
  foot: { gap: 4, paddingTop: 10, borderTopWidth: 1, borderTopColor: color.rule.line },
});
