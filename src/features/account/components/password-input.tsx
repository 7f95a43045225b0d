import { useState, type InputHTMLAttributes, type Ref } from 'react';
import { TextInput } from '../../../components/inputs';

/** A password, with a button that shows what was typed: tired fingers on a small keyboard need to see. */
export function PasswordInput(props: Omit<InputHTMLAttributes<HTMLInputElement>, 'type'> & { ref?: Ref<HTMLInputElement> }) {
  const [isShown, setIsShown] = useState(false);
  return (
    <span className="relative block">
      <TextInput {...props} type={isShown ? 'text' : 'password'} className="pr-18" autoCapitalize="off" spellCheck={false} />
      <button
        type="button"
        aria-pressed={isShown}
        aria-label="Show password"
        onClick={() => setIsShown(!isShown)}
        className="absolute inset-y-0 right-0 min-w-16 rounded-sm px-3 text-note font-semibold text-kingfisher outline-offset-[-3px] hover:underline"
      >
        {isShown ? 'Hide' : 'Show'}
      </button>
    </span>
  );
}
