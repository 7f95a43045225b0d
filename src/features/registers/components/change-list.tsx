import type { RegisterChange } from '../../../../shared/schemas/registers';
import { pathWords } from '../model/path-words';

const SHOWN = 6;
const said = (text: string): string => (text === '' ? 'nothing' : text);

const Line = ({ change }: { change: RegisterChange }) => (
  <li className="break-words">
    <span className="text-ink2">{pathWords(change.path)}: </span>
    {change.from === change.to ? 'redrawn' : `${said(change.from)} → ${said(change.to)}`}
  </li>
);

/** What changed, field by field: the first few at once, the rest on asking. */
export function ChangeList({ changes }: { changes: readonly RegisterChange[] }) {
  const rest = changes.slice(SHOWN);
  return (
    <>
      <ul className="list-none">{changes.slice(0, SHOWN).map((change) => <Line key={change.path} change={change} />)}</ul>
      {rest.length > 0 && (
        <details>
          <summary className="min-h-6 text-kingfisher">{`${rest.length} more`}</summary>
          <ul className="list-none">{rest.map((change) => <Line key={change.path} change={change} />)}</ul>
        </details>
      )}
    </>
  );
}
