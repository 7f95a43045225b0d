import { fireEvent, render, screen } from '@testing-library/react';
import { useState } from 'react';
import { describe, expect, it } from 'vitest';
import { Field } from './field';
import { InstantInput } from './instant-input';
import { NumberInput } from './number-input';
import { RangeInput, type RangeValue } from './range-input';

function Depth({ start = null, ...limits }: { start?: number | null; min?: number; max?: number; step?: number }) {
  const [value, setValue] = useState<number | null>(start);
  return (
    <>
      <Field label="Depth" unit="m" hint="Mean over the width">
        <NumberInput value={value} onChange={setValue} unit="m" {...limits} />
      </Field>
      <output>{String(value)}</output>
      <button onClick={() => setValue(7)}>Set to 7</button>
    </>
  );
}

const type = (input: HTMLElement, text: string) => {
  fireEvent.change(input, { target: { value: text } });
  fireEvent.blur(input);
};
const value = () => screen.getByRole('status').textContent;

describe('a number', () => {
  it('is found by its label and unit, and described by its hint', () => {
    render(<Depth />);
    const input = screen.getByLabelText('Depth, m');
    expect(document.getElementById(input.getAttribute('aria-describedby')!)?.textContent).toBe('Mean over the width');
  });

  it('may have a decimal comma, and what was typed stays as it was typed', () => {
    render(<Depth />);
    const input = screen.getByLabelText<HTMLInputElement>('Depth, m');
    type(input, '1,25');
    expect(value()).toBe('1.25');
    expect(input.value).toBe('1,25');
    type(input, '2.50');
    expect(value()).toBe('2.5');
    expect(input.value).toBe('2.50');
  });

  it('may have spaces between thousands', () => {
    render(<Depth />);
    type(screen.getByLabelText('Depth, m'), '12\u202f500');
    expect(value()).toBe('12500');
  });

  it('that can be read two ways is refused with both readings', () => {
    render(<Depth />);
    const input = screen.getByLabelText('Depth, m');
    type(input, '4,000');
    expect(value()).toBe('null');
    expect(input.getAttribute('aria-invalid')).toBe('true');
    expect(screen.getByRole('alert').textContent).toBe('"4,000" can be read two ways: type 4000 or 4.000');
  });

  it.each(['abc', '1.2.3', '--4', '1e999', '5 m'])('is not %s', (typed) => {
    render(<Depth />);
    type(screen.getByLabelText('Depth, m'), typed);
    expect(value()).toBe('null');
    expect(screen.getByRole('alert').textContent).toContain(`"${typed}"`);
  });

  it('is not refused while it is still being typed', () => {
    render(<Depth />);
    fireEvent.change(screen.getByLabelText('Depth, m'), { target: { value: '-' } });
    expect(screen.queryByRole('alert')).toBeNull();
  });

  it('out of range is refused with its value, its unit and the limit', () => {
    render(<Depth min={0.1} max={200} />);
    type(screen.getByLabelText('Depth, m'), '0');
    expect(screen.getByRole('alert').textContent).toBe('0 m is too low: at least 0.1 m');
    type(screen.getByLabelText('Depth, m'), '201');
    expect(screen.getByRole('alert').textContent).toBe('201 m is too high: at most 200 m');
  });

  it('moves by its step with the arrow keys and stops at its limit', () => {
    render(<Depth start={0.2} step={0.1} min={0} />);
    const input = screen.getByLabelText('Depth, m');
    fireEvent.keyDown(input, { key: 'ArrowUp' });
    expect(value()).toBe('0.3');
    for (let i = 0; i < 5; i++) fireEvent.keyDown(input, { key: 'ArrowDown' });
    expect(value()).toBe('0');
  });

  it('set from outside replaces what was typed', () => {
    render(<Depth start={3} />);
    fireEvent.click(screen.getByText('Set to 7'));
    expect(screen.getByLabelText<HTMLInputElement>('Depth, m').value).toBe('7');
  });
});

describe('a range', () => {
  function Mass({ start }: { start: RangeValue }) {
    const [range, setRange] = useState(start);
    return (
      <Field label="Mass" isGroup>
        <RangeInput value={range} onChange={setRange} unit="kg" />
      </Field>
    );
  }

  it('with low above likely is refused in words that say which one to mend', () => {
    render(<Mass start={{ low: null, likely: 4000, high: null }} />);
    type(screen.getByLabelText(/^Low/), '5000');
    expect(screen.getByRole('alert').textContent).toBe('Low (5\u202f000 kg) is above likely (4\u202f000 kg): lower it');
  });

  it('in order is accepted without a word', () => {
    render(<Mass start={{ low: 2000, likely: 4000, high: 8000 }} />);
    expect(screen.queryByRole('alert')).toBeNull();
    expect(screen.getByRole('group', { name: 'Mass' })).toBeTruthy();
  });
});

describe('an instant', () => {
  function Start({ start = null }: { start?: string | null }) {
    const [iso, setIso] = useState<string | null>(start);
    return (
      <>
        <InstantInput value={iso} offset="-08:00" onChange={setIso} />
        <output>{String(iso)}</output>
      </>
    );
  }

  it('is made of day and time in the offset beside them, and read back with its weekday', () => {
    render(<Start />);
    type(screen.getByLabelText('Day'), '12 May 2031');
    type(screen.getByLabelText(/^Time of day/), '640'.padStart(4, '0'));
    expect(value()).toBe('2031-05-12T06:40:00-08:00');
    expect(screen.getByText('Read as Mon 12 May 2031 06:40')).toBeTruthy();
    expect(screen.getByText('UTC-08:00')).toBeTruthy();
  });

  it('given in another offset is shown in this one', () => {
    render(<Start start="2031-05-12T14:40:00Z" />);
    expect(screen.getByLabelText<HTMLInputElement>('Day').value).toBe('2031-05-12');
    expect(screen.getByLabelText<HTMLInputElement>(/^Time of day/).value).toBe('06:40');
  });

  it.each([
    ['2031-02-29', '06:40', '"2031-02-29" does not exist: that month has 28 days'],
    ['05/12/2031', '06:40', '"05/12/2031" can be read two ways: type the day as 2031-05-12 or 12 May 2031'],
    ['2031-13-01', '06:40', '"2031-13-01" has no such month: months run from 1 to 12'],
    ['soon', '06:40', '"soon" is not a day: type 2031-05-12 or 12 May 2031'],
    ['2031-05-12', '24:10', '"24:10" is past the end of the day: times run from 00:00 to 23:59'],
    ['2031-05-12', 'noon', '"noon" is not a time: type it as 06:40'],
  ])('is not %s %s', (day, time, why) => {
    render(<Start start="2031-05-12T06:40:00-08:00" />);
    type(screen.getByLabelText('Day'), day);
    type(screen.getByLabelText(/^Time of day/), time);
    expect(value()).toBe('null');
    expect(screen.getByRole('alert').textContent).toBe(why);
  });

  it('moves over the end of a month with the arrow keys', () => {
    render(<Start start="2031-05-31T23:57:00-08:00" />);
    fireEvent.keyDown(screen.getByLabelText(/^Time of day/), { key: 'ArrowUp' });
    expect(value()).toBe('2031-06-01T00:02:00-08:00');
  });
});
