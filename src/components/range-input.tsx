import { useId } from 'react';
import { formatEntered } from '../../shared/format';
import { FieldError } from './field';
import { NumberInput } from './number-input';

export type RangeValue = { low: number | null; likely: number | null; high: number | null };
const parts = ['low', 'likely', 'high'] as const;
const words = { low: 'Low', likely: 'Likely', high: 'High' } as const;

function disorder({ low, likely, high }: RangeValue, unit: string): string | null {
  const say = (n: number) => `${formatEntered(n)} ${unit}`.trim();
  if (low !== null && likely !== null && low > likely) return `Low (${say(low)}) is above likely (${say(likely)}): lower it`;
  if (high !== null && likely !== null && high < likely) return `High (${say(high)}) is below likely (${say(likely)}): raise it`;
  return null;
}

/** Low, likely and high side by side. Only likely is needed; stand it in a `Field isGroup`. */
export function RangeInput({ value, onChange, unit, min = 0, max, step }: { value: RangeValue; onChange: (value: RangeValue) => void; unit: string; min?: number; max?: number; step?: number }) {
  const id = useId();
  const problem = disorder(value, unit);
  return (
    <>
      <div className="grid grid-cols-[1fr_1.3fr_1fr] items-start gap-2">
        {parts.map((part) => (
          <div key={part} className="min-w-0">
            <NumberInput
              id={`${id}-${part}`}
              aria-labelledby={`${id}-${part}-word`}
              aria-describedby={problem ? `${id}-problem` : undefined}
              value={value[part]}
              onChange={(next) => onChange({ ...value, [part]: next })}
              {...(part === 'likely' ? { unit } : {})}
              min={min}
              {...(max !== undefined ? { max } : {})}
              {...(step !== undefined ? { step } : {})}
              className={part === 'likely' ? 'font-semibold' : ''}
            />
            <label id={`${id}-${part}-word`} htmlFor={`${id}-${part}`} className="mt-0.5 block text-note text-ink2">
              {words[part]}
              <span className="sr-only">, {unit}</span>
              {part !== 'likely' && <span className="sr-only"> (may stay empty)</span>}
            </label>
          </div>
        ))}
      </div>
      {problem && <FieldError id={`${id}-problem`}>{problem}</FieldError>}
    </>
  );
}
