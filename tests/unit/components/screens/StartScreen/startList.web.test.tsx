import { act, render, screen } from '@testing-library/react';
import { StartList } from '@/components/screens/StartScreen/StartList';
import { groupTitles, presetStarts } from '@/components/screens/StartScreen/starts';
import { presets } from '@/lib/document/presets/presets';

/** Observers that see nothing until the test says so. */
const seen: (() => void)[] = [];
beforeAll(() => {
  globalThis.IntersectionObserver = class {
    constructor(private readonly call: IntersectionObserverCallback) {}
    observe() {
      seen.push(() => this.call([{ isIntersecting: true } as IntersectionObserverEntry], this as never));
    }
    disconnect() {}
  } as never;
});

const builds = presets.map((preset) => jest.spyOn(preset, 'build'));
const built = () => builds.filter((build) => build.mock.calls.length > 0).length;

test('the list opens with every name and number and builds a document only for what is seen', async () => {
  const starts = presetStarts();
  const basics = starts.filter(({ group }) => group === 'Bench basics');
  const title = groupTitles['Bench basics'];
  const { container } = render(
    <StartList title={title} starts={basics} chosenId="" onChoose={() => {}} onUse={() => {}} />,
  );
  expect(screen.getAllByRole('radio')).toHaveLength(basics.length);
  expect(
    screen.getByRole('radio', { name: /64 tones, Newman phases.*Common practice, no source.*256 · 100 kHz/ }),
  ).toBeTruthy();
  expect(container.querySelectorAll('svg')).toHaveLength(0);
  expect(built()).toBe(0);
  await act(async () => {
    seen[0]!();
    await new Promise((resolve) => setTimeout(resolve, 5));
  });
  expect(built()).toBe(1);
  expect(container.querySelectorAll('svg')).toHaveLength(1);
});
