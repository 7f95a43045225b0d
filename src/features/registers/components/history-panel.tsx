import { useQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import type { RegisterName } from '../../../../shared/schemas/registers';
import { Loading } from '../../../components/progress-text';
import { Section } from '../../../components/page';
import { RuledList, RuledRow } from '../../../components/ruled-list';
import { TimeText } from '../../../components/time-text';
import { useDefaultOffset } from '../../../lib/session';
import { registerHistoryQuery } from '../api';
import { ChangeList } from './change-list';

/** Who changed what, when and why; every version can be read. */
export function HistoryPanel({ register, id, shownVersion }: { register: RegisterName; id: string; shownVersion: number }) {
  const { data: history } = useQuery(registerHistoryQuery(register, id));
  const offset = useDefaultOffset();
  if (!history) return <Loading what="the history" />;
  return (
    <Section title="History" className="no-print">
      <RuledList label="Versions, the newest first">
        {history.map((entry) => (
          <RuledRow
            key={entry.version}
            lead={<TimeText iso={entry.at} offset={offset} />}
            leadWidth="wide"
            trail={entry.version === shownVersion ? <span className="text-ink2">shown above</span> : <Link to={`?version=${entry.version}`}>Read version {entry.version}</Link>}
          >
            <p className="font-semibold">
              Version {entry.version}, {entry.by}
              {entry.reason && <span className="font-normal">: {entry.reason}</span>}
            </p>
            {entry.changes.length > 0 ? <ChangeList changes={entry.changes} /> : <p className="text-ink2">First written</p>}
          </RuledRow>
        ))}
      </RuledList>
    </Section>
  );
}
