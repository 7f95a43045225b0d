import { amountOf } from '../../../../shared/amount';
import { formatAmount, formatClockOffset, formatDuration, formatPosition, type Measure } from '../../../../shared/format';
import type { EstimateDocument, Release } from '../../../../shared/schemas/estimate';
import { EstimateCaution } from '../../../components/estimate-caution';
import type { Clock } from '../model/arrival-words';
import type { Forecast } from '../model/forecast';
import { channelWords } from '../model/place';
import { ArrivalTable } from './arrival-table';
import { ChecksPanel } from './checks-panel';
import type { Rows } from './receptors-panel';
import { WorkingView } from './working-view';

type Props = { forecast: Forecast; document: EstimateDocument; rows: Rows; clock: Clock; measure: Measure };

/** What paper gets besides map and rail: inputs in words, the table, checks, working. */
export function PrintedResults({ forecast, document, rows, clock, measure }: Props) {
  return (
    <div className="hidden flex-col gap-6 pt-4 print:flex">
      <EstimateCaution />
      <section>
        <h2 className="text-lead font-semibold">Assumed</h2>
        <p>
          {document.substance.name} {document.substance.basis}. T0 {formatClockOffset(clock.startMs, clock.offset)}. {document.water.name}
          {document.water.kind === 'river' ? `, flow ${document.water.flow.name}` : ''}. {document.substance.applyLoss ? 'With losses.' : 'Without losses.'} Estimate over {formatDuration(document.horizonS)}.
        </p>
        <ul className="list-disc pl-5">
          {document.releases.map((release) => (
            <li key={release.id}>{printedRelease(document, release, measure)}</li>
          ))}
        </ul>
      </section>
      <div className="text-[8pt] [&_td]:pr-2 [&_th]:pr-2 [&_td_*]:whitespace-normal">
        <ArrivalTable rows={rows} clock={clock} measure={measure} selectedId={null} isPrinted />
      </div>
      <section>
        <h2 className="text-lead font-semibold">Checks</h2>
        <ChecksPanel checks={forecast.result?.checks ?? null} />
      </section>
      {forecast.result && <WorkingView result={forecast.result} receptor={null} answer={null} />}
    </div>
  );
}

function printedRelease(document: EstimateDocument, release: Release, measure: Measure): string {
  const { low, likely, high } = amountOf(release.amount);
  const say = (value: number) => `${formatAmount(value, measure).text} ${formatAmount(value, measure).unit}`;
  const amount = likely === null ? 'amount not known' : `${say(likely)}${low !== null || high !== null ? ` (${say(low ?? likely)} to ${say(high ?? likely)})` : ''}`;
  const reach = document.water.kind === 'river' ? document.water.reaches.find((one) => one.id === release.channel?.reachId) : null;
  const place = reach && release.channel ? `${channelWords(reach, release.channel.chainageKm, release.channel.bank)}, ` : '';
  const over = release.timing.kind === 'instantaneous' ? 'at once' : release.timing.kind === 'steady' ? `over ${formatDuration(release.timing.durationS)}` : 'by a table of rates';
  return `${release.name}: ${amount} ${over}, ${place}${formatPosition(release.position, 'decimal')}${release.evidence ? `. ${release.evidence}` : ''}`;
}
