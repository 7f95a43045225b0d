import type { Check } from '../../../../shared/schemas/estimate-result';
import { StatusWord, type StatusTone } from '../../../components/status-word';
import { readableChecks } from '../model/forecast';

const severityWords: Record<Check['severity'], { word: string; tone: StatusTone }> = {
  stop: { word: 'stop', tone: 'bad' },
  warn: { word: 'read this', tone: 'attention' },
  note: { word: 'note', tone: 'neutral' },
};

export function checksSummary(checks: readonly Check[] | null): string {
  if (checks === null) return 'with the forecast';
  const toRead = checks.filter((check) => check.severity !== 'note').length;
  return toRead > 0 ? `${toRead} to read` : checks.length > 0 ? `${checks.length} noted` : 'nothing to read';
}

/** What the numbers themselves say against the estimate, with what to do about it. */
export function ChecksPanel({ checks }: { checks: readonly Check[] | null }) {
  if (checks === null) return <p className="text-ink2">The checks come with the forecast.</p>;
  if (checks.length === 0) return <p className="text-ink2">No check was tripped. That does not make the estimate right: compare it with samples.</p>;
  return (
    <ul className="list-none">
      {readableChecks(checks).map((check, i) => (
        <li key={`${check.code}-${check.receptorId ?? ''}-${i}`} className="border-b border-rule py-2 last:border-b-0">
          <StatusWord tone={severityWords[check.severity].tone}>{severityWords[check.severity].word}</StatusWord>
          <p className="font-semibold">{check.title}</p>
          <p>{check.detail}</p>
          {check.remedy && <p className="text-note text-ink2">{check.remedy}</p>}
        </li>
      ))}
    </ul>
  );
}
