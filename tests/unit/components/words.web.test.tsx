import { render, screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { useState } from 'react';
import { AnyOf, OneOf } from '@/components/ui/WordsToPress';

const choices = [
  { value: 'raw', label: 'raw' },
  { value: 'wav', label: 'WAV', offBecause: 'No pack can be written as WAV yet.' },
  { value: 'npy', label: 'npy' },
] as const;
type Container = (typeof choices)[number]['value'];

function Containers({ onChange }: { onChange: (value: Container) => void }) {
  const [value, setValue] = useState<Container>('raw');
  return (
    <OneOf<Container>
      label="Container"
      choices={choices}
      value={value}
      onChange={(next) => {
        setValue(next);
        onChange(next);
      }}
    />
  );
}

describe('OneOf', () => {
  it('is one stop of the Tab key; arrows move the choice and wrap round', async () => {
    const onChange = jest.fn();
    render(<Containers onChange={onChange} />);
    await userEvent.tab();
    expect(screen.getByRole('radio', { name: 'raw' })).toHaveFocus();
    await userEvent.keyboard('{ArrowLeft}');
    expect(onChange).toHaveBeenLastCalledWith('npy');
    expect(screen.getByRole('radio', { name: 'npy' })).toBeChecked();
    await userEvent.tab();
    expect(document.body).toHaveFocus();
  });

  it('reaches a word that cannot be pressed, which says why and changes nothing', async () => {
    const onChange = jest.fn();
    render(<Containers onChange={onChange} />);
    await userEvent.tab();
    await userEvent.keyboard('{ArrowRight}');
    expect(screen.getByRole('radio', { name: 'WAV' })).toHaveFocus();
    expect(screen.getByRole('status')).toHaveTextContent('No pack can be written as WAV yet.');
    expect(onChange).not.toHaveBeenCalled();
    expect(screen.getByRole('radio', { name: 'raw' })).toBeChecked();
    await userEvent.keyboard('{ArrowRight}');
    expect(onChange).toHaveBeenLastCalledWith('npy');
    expect(screen.queryByRole('status')).toBeNull();
  });
});

describe('AnyOf', () => {
  it('tells who may only look why nothing can be pressed', async () => {
    const onToggle = jest.fn();
    render(
      <AnyOf
        label="Plays"
        choices={[
          { value: 'loop', label: 'loop' },
          { value: 'burst', label: 'burst' },
        ]}
        values={['loop']}
        onToggle={onToggle}
        offBecause="Changing a bench needs the admin role."
      />,
    );
    const burst = screen.getByRole('button', { name: 'burst' });
    expect(burst).toHaveAttribute('aria-disabled', 'true');
    await userEvent.click(burst);
    expect(onToggle).not.toHaveBeenCalled();
    expect(screen.getByRole('status')).toHaveTextContent('Changing a bench needs the admin role.');
  });
});
