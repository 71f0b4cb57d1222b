import { act, render, screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { TextInput } from 'react-native';
import { Button } from '@/components/ui/Button';
import { Dialog, Sheet } from '@/components/ui/overlay';
import { Text } from '@/components/ui/Text';
import { themes } from '@/components/ui/tokens';

// jsdom drops custom properties, so the paper theme's own values stand in for them
jest.mock('@/components/ui/theme', () => {
  const { themes } = jest.requireActual<typeof import('@/components/ui/tokens')>('@/components/ui/tokens');
  return { ...jest.requireActual<object>('@/components/ui/theme'), color: themes.paper };
});

const isFilled = (name: string) => {
  const ground = getComputedStyle(screen.getByRole('button', { name })).backgroundColor;
  expect(ground).toMatch(/^rgb/);
  const [red, green, blue] = [1, 3, 5].map((at) => parseInt(themes.paper.accent.solid.slice(at, at + 2), 16));
  return ground.startsWith(`rgb(${red}, ${green}, ${blue}`);
};

describe('Button', () => {
  it('stays focusable when it cannot be pressed, says why, and does nothing', async () => {
    const onPress = jest.fn();
    render(
      <Button disabledBecause="A waveform needs a title." onPress={onPress}>
        Use this start
      </Button>,
    );
    const button = screen.getByRole('button', { name: 'Use this start' });
    expect(screen.queryByText('A waveform needs a title.')).toBeNull();
    expect(button).toHaveAttribute('aria-disabled', 'true');
    await userEvent.tab();
    expect(button).toHaveFocus();
    await userEvent.keyboard('{Enter}');
    expect(onPress).not.toHaveBeenCalled();
    expect(screen.getByRole('status')).toHaveTextContent('A waveform needs a title.');
    expect(button).toHaveAttribute('aria-description', 'A waveform needs a title.');
    await userEvent.tab();
    expect(screen.queryByText('A waveform needs a title.')).toBeNull();
  });

  it('says why over the page, in its dialog where it has one, so that nothing moves', async () => {
    const reason = 'Say why.';
    const { container } = render(<Button disabledBecause={reason}>Use this start</Button>);
    await userEvent.click(screen.getByRole('button'));
    expect(container).not.toHaveTextContent(reason);
    expect(getComputedStyle(screen.getByRole('status')).position).toBe('fixed');
    render(
      <Sheet title="Return" onClose={jest.fn()} foot={<Button disabledBecause={reason}>Return it</Button>}>
        <Text>Body</Text>
      </Sheet>,
    );
    await userEvent.click(screen.getByRole('button', { name: 'Return it' }));
    expect(screen.getByRole('dialog')).toHaveTextContent(reason);
  });

  it('keeps its label while busy and is not pressed twice', async () => {
    const onPress = jest.fn();
    render(
      <Button busy onPress={onPress}>
        Release
      </Button>,
    );
    const button = screen.getByRole('button', { name: 'Release' });
    await userEvent.click(button);
    expect(onPress).not.toHaveBeenCalled();
    expect(button).toHaveAttribute('aria-busy', 'true');
  });

  it('is drawn ruled behind a sheet, whose own primary is the filled one', () => {
    const page = <Button kind="filled">Make a pack</Button>;
    const { rerender } = render(page);
    expect(isFilled('Make a pack')).toBe(true);
    rerender(
      <>
        {page}
        <Sheet title="Make a pack" onClose={jest.fn()} foot={<Button kind="filled">Make the pack</Button>}>
          <Text>Body</Text>
        </Sheet>
      </>,
    );
    expect(isFilled('Make a pack')).toBe(false);
    expect(isFilled('Make the pack')).toBe(true);
  });
});

describe('Sheet and Dialog', () => {
  it('asks once before it throws away what was typed', async () => {
    const onClose = jest.fn();
    render(
      <Sheet title="Return with a note" onClose={onClose} unsaved>
        <TextInput aria-label="Note" />
      </Sheet>,
    );
    act(() => screen.getByLabelText('Note').focus());
    await userEvent.keyboard('{Escape}');
    expect(onClose).not.toHaveBeenCalled();
    expect(screen.getByRole('alert')).toHaveTextContent('Leave without saving?');
    await userEvent.click(screen.getByRole('button', { name: 'Stay' }));
    expect(screen.queryByRole('alert')).toBeNull();
    await userEvent.click(screen.getByRole('button', { name: 'Close' }));
    await userEvent.click(screen.getByRole('button', { name: 'Leave' }));
    expect(onClose).toHaveBeenCalledTimes(1);
  });

  it('closes at once where nothing would be lost', async () => {
    const onClose = jest.fn();
    render(
      <Sheet title="Files" onClose={onClose}>
        <Text>Body</Text>
      </Sheet>,
    );
    await userEvent.keyboard('{Escape}');
    expect(onClose).toHaveBeenCalledTimes(1);
  });

  it('starts a dialog on its safe button, although a field comes first', () => {
    render(
      <Dialog
        question="Why should nobody use it?"
        onClose={jest.fn()}
        safe={{ label: 'Keep it', onPress: jest.fn() }}
        act={{ label: 'Withdraw edition 3', grave: true, onPress: jest.fn() }}
      >
        <input aria-label="Reason" />
      </Dialog>,
    );
    expect(screen.getByRole('button', { name: 'Keep it' })).toHaveFocus();
    expect(screen.getByRole('alertdialog', { name: 'Why should nobody use it?' })).toBeInTheDocument();
  });
});
