import { render, screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { useState } from 'react';
import { LevelCardView } from '@/components/screens/PackScreen/LevelCardView';
import { paLadder } from '@/lib/document/demoDocuments';
import { newBenchContent } from '@/components/screens/BenchScreen/fields';
import { levelCard, type WaveformIntent } from '@/lib/synth';

const measured = {
  fileRmsDbfs: -12,
  activeRmsDbfs: -12,
  renderedPeakDbfs: -1.2,
  reconstructedPeakDbfs: -1,
  saturatedComponents: 0,
};
const base: WaveformIntent = {
  ...paLadder().intent,
  outputRmsDbm: -22,
  lossDb: 20,
  devicePeakLimitDbm: -10,
  deviceMeanLimitDbm: -18,
  levelToleranceDb: 1,
};

function Card({ intent }: { intent: WaveformIntent }) {
  const [typed, setTyped] = useState<number | null>(null);
  const card = levelCard(
    { content: { fftSize: 64, oversampling: 1, subcarrierSpacingHz: [15000, 1] }, intent },
    { content: { ...newBenchContent, levelMeans: 'activeRms' } },
    measured,
    typed === null ? {} : { settingDbm: typed },
  );
  return <LevelCardView card={card} onSetting={setTyped} typed={typed !== null} />;
}

const setting = () => screen.getByRole('textbox', { name: 'Set on the generator, dBm' });

describe('LevelCardView', () => {
  it('shows the setting, the highest setting with a real minus, and what is left in words', () => {
    render(<Card intent={base} />);
    // −22 dBm wanted after 20 dB of loss; the peak stands 11 dB over the mean: −11 dBm, 1 dB under its limit
    expect(setting()).toHaveValue('−2.0');
    expect(screen.getByText('1.00 dB left to the peak limit, 4.00 dB to the mean.')).toBeInTheDocument();
    expect(screen.getByText(/Peak limit −10\.00 dBm/)).toBeInTheDocument();
  });

  it('says that a typed setting is over and by how much, and goes back to its own', async () => {
    render(<Card intent={base} />);
    await userEvent.clear(setting());
    await userEvent.type(setting(), '0.2{Enter}');
    expect(screen.getByText(/Over by 1\.2.? ?dB: do not switch on/)).toBeInTheDocument();
    await userEvent.click(screen.getByRole('button', { name: 'Back to the card’s setting' }));
    expect(setting()).toHaveValue('−2.0');
    expect(screen.queryByText(/do not switch on/)).toBeNull();
  });

  it('keeps what is no number, with a reason, and Escape restores', async () => {
    render(<Card intent={base} />);
    await userEvent.clear(setting());
    await userEvent.type(setting(), 'loud{Enter}');
    expect(screen.getByRole('alert')).toHaveTextContent('This is not a number.');
    expect(setting()).toHaveValue('loud');
    await userEvent.type(setting(), '{Escape}');
    expect(setting()).toHaveValue('−2.0');
    expect(screen.queryByRole('alert')).toBeNull();
  });

  it('never says that all is well where no limit is given', () => {
    render(<Card intent={{ ...base, devicePeakLimitDbm: null, deviceMeanLimitDbm: null }} />);
    expect(screen.queryByText('Highest setting')).toBeNull();
    expect(screen.getByRole('status')).toHaveTextContent('No peak limit given. Ask before you connect.');
  });
});
