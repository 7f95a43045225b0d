import type { ReactNode } from 'react';
import { formatDistance, formatDuration, formatRatio, type Measure } from '../../../../shared/format';
import type { EstimateReceptor } from '../../../../shared/schemas/estimate';
import type { ActionAnswer, ReceptorAnswer } from '../../../../shared/schemas/estimate-result';
import { classNames } from '../../../lib/class-names';
import { arrivalWords, sayConcentration, sayDose, sayRange, writeTime, type Clock, type Written } from '../model/arrival-words';

type Props = { receptor: EstimateReceptor; answer: ReceptorAnswer; clock: Clock; measure: Measure };

/** All figures of one receptor, one list per action value. */
export function ReceptorDetail({ receptor, answer, clock, measure }: Props) {
  const peakAt = writeTime(clock, answer.peakS, 'early');
  const edge = writeTime(clock, answer.leadingEdgeS, 'early');
  return (
    <div className="flex flex-col gap-3">
      {answer.reason && !answer.answers.some((one) => one.reason === answer.reason) && <p>{answer.reason}</p>}
      {answer.answers.map((one) => (
        <ActionDetail key={one.index} one={one} receptor={receptor} clock={clock} measure={measure} />
      ))}
      <Figures
        rows={[
          ['Peak', sayRange(answer.peak, measure)],
          ['Peak at', peakAt && <At at={peakAt} />],
          ['Leading edge (2 % of the peak)', edge && <At at={edge} />],
          ['Dose over the estimate', sayDose(answer.dose.high ?? answer.dose.likely, measure)],
          ['Peak with losses', answer.withLosses && sayConcentration(answer.withLosses.peak, measure)],
          ['Distance along the water', answer.distanceM !== null && formatDistance(answer.distanceM)],
          ['Closing takes', receptor.closingS !== null && formatDuration(receptor.closingS)],
          ['Storage lasts', receptor.storageS !== null && formatDuration(receptor.storageS)],
        ]}
      />
    </div>
  );
}

function ActionDetail({ one, receptor, clock, measure }: { one: ActionAnswer; receptor: EstimateReceptor; clock: Clock; measure: Measure }) {
  const value = receptor.actionValues[one.index];
  const words = arrivalWords(clock, one);
  const closeBy = one.arrivalS.early !== null && receptor.closingS !== null ? writeTime(clock, one.arrivalS.early - receptor.closingS, 'early') : null;
  return (
    <section className="border-t border-ink pt-2">
      <h3 className="font-semibold">
        {one.verdict}: action value {sayConcentration(one.value, measure)} {value?.basis}
        <span className="block text-note font-normal text-ink2">
          {value?.source || 'source not given'}
          {value && value.averagingS > 0 && `, mean over ${formatDuration(value.averagingS)}`}
        </span>
      </h3>
      {one.reason && <p className="text-note">{one.reason}</p>}
      {one.verdict === 'may exceed' && (
        <Figures
          rows={[
            ['Earliest arrival', words.earliest && <At at={words.earliest} isLarge />],
            ['Start closing no later than', closeBy && <At at={closeBy} />],
            ['Likely arrival', words.likely && <At at={words.likely} />],
            ['Latest arrival', words.latest && <At at={words.latest} />],
            ['End', words.endOpen ? 'beyond the end of the estimate' : words.end && <At at={words.end} />],
            ['Time above', words.timeAbove],
            ['Peak over action value', one.ratio !== null && formatRatio(one.ratio)],
          ]}
        />
      )}
    </section>
  );
}

const At = ({ at, isLarge = false }: { at: Written; isLarge?: boolean }) => (
  <span>
    <span className={classNames('font-semibold whitespace-nowrap', isLarge && 'text-lead @4xl:text-figure')}>{at.clock}</span> <span className="text-ink2">{at.elapsed}</span>
  </span>
);

/** A list of names and figures; rows without a figure are left out. */
function Figures({ rows }: { rows: [string, ReactNode][] }) {
  return (
    <dl className="grid grid-cols-[minmax(6rem,auto)_1fr] gap-x-3 @4xl:grid-cols-[minmax(9rem,auto)_1fr]">
      {rows
        .filter(([, figure]) => figure !== null && figure !== false)
        .map(([name, figure]) => (
          <div key={name} className="col-span-2 grid grid-cols-subgrid items-baseline border-b border-rule py-1">
            <dt className="text-ink2">{name}</dt>
            <dd>{figure}</dd>
          </div>
        ))}
    </dl>
  );
}
