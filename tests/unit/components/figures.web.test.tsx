import { render, screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { FigureBlock } from '@/components/drawing/FigureBlock';
import { DigestChip, DigestsInView } from '@/components/ui/DigestChip';
import { FigureRow } from '@/components/ui/Figure';
import { ToastPlace } from '@/components/ui/toast';

/** What stands on the clipboard. */
let copied: string[];
function setClipboard(writeText: (text: string) => Promise<void>) {
  Object.defineProperty(navigator, 'clipboard', { configurable: true, value: { writeText } });
}
const show = () =>
  render(
    <>
      <FigureRow name="Headroom" value="1.25" unit="dB" verdict="meets 1.00" />
      <FigureRow name="Samples" value="61 440" />
      <FigureBlock figures={[{ name: 'Spacing', value: '15', unit: 'kHz' }]} columns={2} />
      <ToastPlace />
    </>,
  );

beforeEach(() => {
  copied = [];
});

it('a figure row copies value and unit by press and by key, says so, and is named by what it shows', async () => {
  const user = userEvent.setup();
  setClipboard(async (text) => void copied.push(text));
  show();
  await user.click(screen.getByRole('button', { name: 'Headroom, 1.25 dB, meets 1.00, copy' }));
  expect(copied).toEqual(['1.25 dB']);
  expect(await screen.findByText('Headroom copied')).toBeInTheDocument();
  await user.tab();
  expect(screen.getByRole('button', { name: 'Samples, 61 440, copy' })).toHaveFocus();
  await user.keyboard('{Enter}');
  expect(copied).toEqual(['1.25 dB', '61 440']);
  await user.click(screen.getByRole('button', { name: 'Spacing, 15 kHz, copy' }));
  expect(copied.at(-1)).toBe('15 kHz');
});

it('a browser that refuses is said to have refused', async () => {
  const user = userEvent.setup();
  setClipboard(() => Promise.reject(new Error('refused')));
  document.execCommand = () => false;
  show();
  await user.click(screen.getByRole('button', { name: /^Samples/ }));
  expect(await screen.findByText('Copying was refused')).toBeInTheDocument();
});

it('equal digests of one view carry “same”', () => {
  const [one, other] = ['ab', 'cd'].map((pair) => `sha256:${pair.repeat(32)}`) as [string, string];
  render(
    <DigestsInView digests={[one, other, one]}>
      {[one, other, one].map((digest, i) => (
        <DigestChip key={i} digest={digest} />
      ))}
    </DigestsInView>,
  );
  expect(screen.getAllByRole('button').map((chip) => /same/.test(chip.textContent))).toEqual([true, false, true]);
});
