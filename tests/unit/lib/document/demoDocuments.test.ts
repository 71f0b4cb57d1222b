import { echoTest, paLadder, threeTones } from '@/lib/document/demoDocuments';
import { parseWaveformDocument } from '@/lib/document/parse';

test.each([
  ['paLadder', paLadder, 14],
  ['echoTest', echoTest, 12],
  ['threeTones', threeTones, 10],
])('the demo document %s is a legal document', (_name, make, symbols) => {
  const parsed = parseWaveformDocument(JSON.stringify(make()));
  expect(parsed).toMatchObject({ ok: true });
  expect(make().content.grid.rowOfSymbol).toHaveLength(symbols);
});
