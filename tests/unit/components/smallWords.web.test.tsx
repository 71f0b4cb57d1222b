import { QueryClient, QueryClientProvider } from '@tanstack/react-query';
import { act, fireEvent, render, screen } from '@testing-library/react';
import { AccountScreen } from '@/components/screens/AccountScreen/AccountScreen';
import { CautionStrip } from '@/components/screens/PackScreen/Cautions';
import { JobRow } from '@/components/screens/PacksScreen/PackJobs';
import { isKeyOfPage } from '@/components/ui/FindField';
import { readPreferences, setPreferences } from '@/components/ui/preferences';
import { MeContext } from '@/lib/client/useSession';
import { ProblemError } from '@/lib/client/useApi';
import type { PackJob } from '@/lib/contracts/packs';

jest.mock('expo-router', () => ({
  Link: () => null,
  useRouter: () => ({ push: jest.fn(), replace: jest.fn() }),
  usePathname: () => '/account',
}));

const inQueries = (node: React.ReactNode) => (
  <QueryClientProvider client={new QueryClient({ defaultOptions: { queries: { retry: false } } })}>
    {node}
  </QueryClientProvider>
);

describe('a pack being made', () => {
  const job = (doneRatio: number): PackJob =>
    ({
      jobId: '01J',
      title: 'Ladder',
      editionNumber: 2,
      bench: { name: 'Bench A' },
      state: 'running',
      step: 'rendering',
      doneRatio,
      startedAgain: false,
    }) as PackJob;
  const row = (doneRatio: number, seenAtMs: number) => inQueries(<JobRow job={job(doneRatio)} seenAtMs={seenAtMs} />);

  it('says how long it takes once it was seen to go', () => {
    const { rerender } = render(row(0.1, 1000));
    expect(screen.getByRole('status')).toHaveTextContent('Rendering 10 %');
    rerender(row(0.12, 2000));
    expect(screen.getByRole('status')).toHaveTextContent(/^Rendering 12 %$/);
    rerender(row(0.5, 5000));
    expect(screen.getByRole('status')).toHaveTextContent('Rendering 50 %, about 5 s left');
    rerender(row(0.5, 805_000));
    expect(screen.getByRole('status')).toHaveTextContent('about 17 min left');
  });
});

it('the first cautions are brief under the card', () => {
  const text =
    'Output off while a file, level or frequency changes. Start low and raise: a new file has a new peak at the same setting.';
  render(<CautionStrip points={[{ number: 3, text, severe: false }]} onAll={() => undefined} />);
  expect(screen.getByRole('listitem')).toHaveTextContent(/has a new peak\.$/);
});

it('a server that failed is named with what it answered and the request', () => {
  const problem = {
    type: 'urn:x',
    title: 'The server failed.',
    status: 500,
    detail: 'The server failed.',
    instance: 'urn:combwright:request:4f1c',
    code: 'internal' as const,
  };
  expect(new ProblemError(problem).message).toBe('The server answered 500. Request 4f1c.');
  const refused = { ...problem, status: 507, code: 'no_room' as const, detail: 'No room to write. Tell an admin.' };
  expect(new ProblemError(refused).message).toBe('No room to write. Tell an admin.');
});

describe('preferences', () => {
  const press = () => new KeyboardEvent('keydown', { key: 'n' });

  it('are set on the account page, kept on the device, and single keys obey', () => {
    global.fetch = (() => new Promise(() => undefined)) as never;
    const me = { personId: '01J', name: 'Ada', email: 'ada@example.org', roles: [], rights: [], isDemo: false };
    render(inQueries(<MeContext value={me as never}>{<AccountScreen />}</MeContext>));
    expect(isKeyOfPage(press())).toBe(true);
    const keys = screen.getByRole('button', { name: 'Single keys act' });
    expect(keys).toHaveAttribute('aria-pressed', 'true');
    fireEvent.click(keys);
    expect(keys).toHaveAttribute('aria-pressed', 'false');
    expect(isKeyOfPage(press())).toBe(false);
    expect(JSON.parse(localStorage.getItem('combwright.preferences')!)).toMatchObject({ singleKeys: false });
    act(() => setPreferences({ singleKeys: true, axesTurned: true }));
    expect(readPreferences()).toEqual({ singleKeys: true, axesTurned: true, oneFingerMoves: false });
  });
});
