import { useFormContext } from 'react-hook-form';
import { Button } from '../../../components/button';
import { Notice } from '../../../components/notice';
import { errorsUnder } from '../model/form-errors';
import { pathWords } from '../model/path-words';

const SHOWN = 8;

/** Finds the field of a path, or of what holds it. */
function focusField(path: string): void {
  for (let at = path; at !== ''; at = at.includes('.') ? at.slice(0, at.lastIndexOf('.')) : '') {
    const field = document.querySelector<HTMLElement>(`[name="${CSS.escape(at)}"]`);
    if (!field) continue;
    field.focus();
    return;
  }
}

/** Everything that is wrong, in one place: a long form hides what stands below. */
export function ErrorSummary() {
  const { formState } = useFormContext();
  const found = errorsUnder(formState.errors);
  if (found.length === 0 || formState.submitCount === 0) return null;
  return (
    <Notice tone="bad" className="mt-6" title={found.length === 1 ? 'One thing to mend before this can be saved' : `${found.length} things to mend before this can be saved`}>
      <ul className="list-none">
        {found.slice(0, SHOWN).map(({ path, message }) => (
          <li key={path}>
            <button type="button" className="min-h-6 text-left text-kingfisher underline underline-offset-2 pointer-coarse:min-h-11" onClick={() => focusField(path)}>{pathWords(path)}</button>: {message}
          </li>
        ))}
        {found.length > SHOWN && <li className="text-ink2">and {found.length - SHOWN} more</li>}
      </ul>
    </Notice>
  );
}

/** Beside the button that saves: how much is left to mend, for those who do not see the top of the form. */
export function ToMend({ onShow }: { onShow: () => void }) {
  const { formState } = useFormContext();
  const count = errorsUnder(formState.errors).length;
  if (count === 0 || formState.submitCount === 0) return null;
  return <Button kind="quiet" icon="attention" onClick={onShow}>{count === 1 ? 'One thing to mend: see which' : `${count} things to mend: see which`}</Button>;
}
