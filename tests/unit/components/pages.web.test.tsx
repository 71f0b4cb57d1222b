import { QueryClient, QueryClientProvider } from '@tanstack/react-query';
import { act, fireEvent, render, screen, waitFor } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { useState, type ReactNode } from 'react';
import { BenchForm } from '@/components/screens/BenchScreen/BenchForm';
import { newBenchContent } from '@/components/screens/BenchScreen/fields';
import { FindingCard, type Finding } from '@/components/screens/FitScreen/FindingCard';
import { LengthRuler, shownSteps } from '@/components/screens/FitScreen/LengthRuler';
import { HistoryScreen } from '@/components/screens/HistoryScreen/HistoryScreen';
import { SignInScreen } from '@/components/screens/SignInScreen/SignInScreen';
import { noteAnswer } from '@/lib/client/connection';
import { MeContext } from '@/lib/client/useSession';
import type { BenchProfile } from '@/lib/synth';

jest.mock('expo-router', () => ({
  Link: ({ children, href, ...rest }: { children: ReactNode; href: unknown }) => (
    <a href={JSON.stringify(href)} aria-label={(rest as { 'aria-label'?: string })['aria-label']}>
      {children}
    </a>
  ),
  useRouter: () => ({ push: jest.fn(), replace: jest.fn() }),
  usePathname: () => '/waveforms',
  useLocalSearchParams: () => ({}),
}));
jest.mock('@/components/screens/SignInScreen/DemoDrawing', () => ({ DemoDrawing: () => null }));

type Answer = { status: number; body: unknown };
let answers: Record<string, () => Answer>;
const asked: string[] = [];
beforeEach(() => {
  asked.length = 0;
  global.fetch = jest.fn(async (address: string, init: { method: string }) => {
    const key = `${init.method} ${address.replace('/api/v1', '')}`;
    asked.push(key);
    const answer = answers[key]?.();
    if (!answer) throw new TypeError('no connection');
    return { ok: answer.status < 400, status: answer.status, headers: new Map(), json: async () => answer.body };
  }) as never;
});

function show(page: ReactNode) {
  const queries = new QueryClient({ defaultOptions: { queries: { retry: false, networkMode: 'always' } } });
  return render(<QueryClientProvider client={queries}>{page}</QueryClientProvider>);
}

const installation = { needsFirstRun: false, hasDemoSignIn: false, isDemo: false };
const problem = (status: number, code: string, detail: string) => ({
  status,
  body: { type: `urn:combwright:problem:${code}`, title: detail, status, detail, instance: 'urn:x', code },
});

describe('SignInScreen', () => {
  const session = () => ({ status: 200, body: { me: null, installation } });
  const fill = async (email: string, password: string) => {
    fireEvent.change(await screen.findByLabelText('E-mail'), { target: { value: email } });
    fireEvent.change(screen.getByLabelText('Password'), { target: { value: password } });
    await userEvent.click(screen.getByText('Sign in'));
  };

  it('leads to the first field that is empty and asks the server nothing', async () => {
    answers = { 'GET /session': session };
    show(<SignInScreen />);
    await fill('ines@team.example', '');
    expect(screen.getByRole('alert')).toHaveTextContent('Enter your password.');
    expect(screen.getByLabelText('Password')).toHaveFocus();
    expect(asked).not.toContain('POST /auth/sign-in');
  });

  it('says the same for an unknown account and a wrong password, and how long to wait after too many tries', async () => {
    let refusal = problem(401, 'sign_in_refused', 'E-mail or password is not right.');
    answers = { 'GET /session': session, 'POST /auth/sign-in': () => refusal };
    show(<SignInScreen />);
    await fill('nobody@team.example', 'long enough, but wrong');
    expect(await screen.findByText('E-mail or password is not right.')).toBeInTheDocument();
    refusal = problem(429, 'too_many', 'Too many tries. Try again in 4 minutes.');
    await userEvent.click(screen.getByText('Sign in'));
    expect(await screen.findByText('Too many tries. Try again in 4 minutes.')).toBeInTheDocument();
  });

  it('says that signing in needs the server when none answers', async () => {
    answers = { 'GET /session': session };
    show(<SignInScreen />);
    await fill('ines@team.example', 'a long password');
    expect(await screen.findByText('No connection. Signing in needs the server.')).toBeInTheDocument();
  });
});

describe('FindingCard', () => {
  const finding: Finding = {
    check: 'granularity',
    title: 'Length',
    measured: 30_720,
    limit: 4096,
    unit: 'samples',
    distance: 2048,
    verdict: 'misses',
    hard: true,
    byHowMuch: '2048 samples short',
    found: '30 720',
    words: '30 720 samples are 7.5 × the granularity of 4096. Only whole multiples load.',
    remedies: [
      {
        kind: 'repeats',
        label: 'Repeat the frame 2 times: 61 440',
        changes: [],
        price: { samples: 30_720, ppm: 0 },
        cost: '30 720 samples more, 0 ppm. The file is twice as long.',
      },
    ],
  };

  it('says what, by how much, and carries a remedy that is one press away', async () => {
    const onApply = jest.fn();
    show(<FindingCard finding={finding} press={{ label: null, press: onApply }} busy={false} ruler />);
    expect(screen.getByRole('heading', { name: 'Length' })).toBeInTheDocument();
    expect(screen.getByText('2048 samples short')).toBeInTheDocument();
    await userEvent.click(screen.getByRole('button', { name: 'Repeat the frame 2 times: 61 440' }));
    expect(onApply).toHaveBeenCalledWith(finding.remedies[0]);
  });

  it('goes from finding to finding by arrows and applies by Enter', async () => {
    const onApply = jest.fn();
    const second = {
      ...finding,
      check: 'headroom' as const,
      remedies: [{ ...finding.remedies[0]!, label: 'Keep 1.1 dB' }],
    };
    show(
      <>
        <FindingCard finding={finding} press={{ label: null, press: onApply }} busy={false} ruler />
        <FindingCard finding={second} press={{ label: null, press: onApply }} busy={false} ruler />
      </>,
    );
    await userEvent.tab();
    await userEvent.keyboard('{ArrowDown}');
    expect(screen.getByRole('button', { name: 'Keep 1.1 dB' })).toHaveFocus();
    await userEvent.keyboard('{Enter}');
    expect(onApply).toHaveBeenCalledWith(second.remedies[0]);
  });

  it('makes a new draft where the revision itself cannot change', async () => {
    const press = jest.fn();
    const label = 'Make a new draft with this remedy';
    show(<FindingCard finding={finding} press={{ label, press }} busy={false} ruler={false} />);
    expect(screen.getByText('Repeat the frame 2 times: 61 440')).toBeInTheDocument();
    await userEvent.click(screen.getByRole('button', { name: `Repeat the frame 2 times: 61 440. ${label}` }));
    expect(press).toHaveBeenCalledWith(finding.remedies[0]);
  });

  it('offers no button where nothing may be changed, and says where nothing can mend it', () => {
    show(<FindingCard finding={finding} press={null} busy={false} ruler={false} />);
    expect(screen.queryByRole('button')).toBeNull();
    expect(screen.getByText('Repeat the frame 2 times: 61 440')).toBeInTheDocument();
    show(<FindingCard finding={{ ...finding, remedies: [] }} press={null} busy={false} ruler={false} />);
    expect(screen.getByText('Nothing in the waveform can mend this. Choose another bench.')).toBeInTheDocument();
  });

  it('draws the length on a ruler of the granularity, its end alone where there are many steps', () => {
    expect(shownSteps(30_720, 4096)).toEqual({ first: 0, end: 8 });
    expect(shownSteps(32_768, 4096)).toEqual({ first: 0, end: 8 });
    expect(shownSteps(15_360, 4)).toEqual({ first: 3832, end: 3840 });
    show(<LengthRuler samples={30_720} granularity={4096} />);
    expect(screen.getByRole('img', { name: /end inside step 8 of 4096 each/ })).toBeInTheDocument();
  });
});

describe('BenchForm', () => {
  const start: BenchProfile = {
    format: 'combwright.bench',
    version: 1,
    about: { name: 'Bench C', notes: '' },
    content: { ...newBenchContent, bits: 12, align: 'left' },
  };
  function Form({ readOnly = false, seen }: { readOnly?: boolean; seen?: (profile: BenchProfile) => void }) {
    const [profile, setProfile] = useState(start);
    return (
      <BenchForm
        profile={profile}
        onChange={(next) => {
          setProfile(next);
          seen?.(next);
        }}
        errors={{}}
        warnings={[]}
        onTyping={jest.fn()}
        readOnly={readOnly}
      />
    );
  }

  // found by their words, not their roles: jsdom works out sixty roles in seconds
  it('takes along what a word fixes: 8 bits, right-aligned, and says so', async () => {
    const seen = jest.fn();
    show(<Form seen={seen} />);
    expect(screen.getByText('±2047')).toBeInTheDocument();
    fireEvent.click(screen.getByText('8 bit'));
    expect(seen.mock.lastCall[0].content).toMatchObject({ word: 'int8', bits: 8, align: 'right' });
    expect(screen.getByText('±127')).toBeInTheDocument();
    fireEvent.click(screen.getByText('left'));
    expect(screen.getByText('An 8-bit word has 8 bits, right-aligned.')).toBeInTheDocument();
    expect(screen.getByText('right').closest('[role=radio]')).toBeChecked();
  });

  it('reads a clock with its unit and shows it tidy', async () => {
    const seen = jest.fn();
    show(<Form seen={seen} />);
    const fastest = screen.getByLabelText(/^Fastest/);
    act(() => fastest.focus());
    fireEvent.change(fastest, { target: { value: '0,25G' } });
    await userEvent.keyboard('{Enter}');
    expect(seen.mock.lastCall[0].content.sampleClockHz.most).toBe(250_000_000);
    expect(screen.getByLabelText(/^Fastest, MHz/)).toHaveValue('250');
  });

  it('gives the value back on Escape', async () => {
    const seen = jest.fn();
    show(<Form seen={seen} />);
    const granularity = screen.getByLabelText(/^Granularity/);
    act(() => granularity.focus());
    fireEvent.change(granularity, { target: { value: '4o96' } });
    await userEvent.keyboard('{Escape}');
    expect(granularity).toHaveValue('1');
    fireEvent.blur(granularity);
    expect(seen).not.toHaveBeenCalled();
  });

  it('changes nothing for who may only look, and says who may', async () => {
    const seen = jest.fn();
    show(<Form readOnly seen={seen} />);
    fireEvent.click(screen.getByText('high first'));
    expect(screen.getByText('Changing a bench needs the admin role.')).toBeInTheDocument();
    expect(screen.getByLabelText(/^Granularity/)).toHaveAttribute('readonly');
    expect(seen).not.toHaveBeenCalled();
  });
});

describe('HistoryScreen', () => {
  const id = (n: number) => `01J0000000000000000000000${n}`;
  const ines = { personId: id(1), name: 'Ines Okoro' };
  const digest = `sha256:${'6ecf'.padEnd(60, '0')}b2fb`;
  const revision = (number: number, savedAtMs: number, more: object = {}) => ({
    revisionId: id(number),
    waveformId: id(9),
    number,
    parentId: null,
    contentDigest: digest,
    intentDigest: digest,
    documentDigest: digest,
    title: 'PA ladder',
    savedBy: ines,
    savedAtMs,
    isHead: number === 4,
    isSide: false,
    stamp: { state: 'draft', editionNumber: null, atMs: savedAtMs, by: ines, reason: null, cameBack: null },
    ...more,
  });

  it('shows one sitting as one line and a side revision by itself', async () => {
    const now = Date.now();
    const revisions = [
      revision(4, now),
      revision(3, now - 60_000),
      revision(2, now - 120_000, { isSide: true }),
      revision(1, now - 180_000),
    ];
    answers = {
      'GET /session': () => ({ status: 200, body: { me: null, installation } }),
      [`GET /waveforms/${id(9)}`]: () => ({
        status: 200,
        body: {
          waveformId: id(9),
          title: 'PA ladder',
          createdBy: ines,
          createdAtMs: 0,
          source: null,
          head: revisions[0],
          openReview: null,
          editions: [],
        },
      }),
      [`GET /waveforms/${id(9)}/revisions`]: () => ({ status: 200, body: { revisions, hasOlder: false } }),
    };
    const me = { ...ines, email: 'ines@team.example', roles: ['author'], isDemo: false };
    show(
      <MeContext value={{ ...me, rights: ['readWaveforms', 'saveWaveforms'] } as never}>
        <HistoryScreen waveformId={id(9)} />
      </MeContext>,
    );
    expect(await screen.findByText('Revisions 3 to 4, newest')).toBeInTheDocument();
    expect(screen.getByText('Revision 2')).toBeInTheDocument();
    expect(screen.getByText(/kept beside: somebody saved first/)).toBeInTheDocument();
    expect(screen.getByText('Revision 1')).toBeInTheDocument();
    await waitFor(() => expect(screen.getByRole('button', { name: 'Ask for review' })).toBeInTheDocument());
    expect(screen.getAllByRole('heading', { level: 1 })).toHaveLength(1);
    // the page stays to be read and says how old it is; the next answer takes the words away
    act(() => noteAnswer(false));
    expect(screen.getByText(/^No connection\. What you see was loaded at \d\d:\d\d\.$/)).toBeInTheDocument();
    expect(screen.getByText('Revision 2')).toBeInTheDocument();
    act(() => noteAnswer(true));
    expect(screen.queryByText(/^No connection/)).toBeNull();
  });
});
