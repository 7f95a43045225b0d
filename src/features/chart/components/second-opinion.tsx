import { formatNumber } from '../../../../shared/format';
import type { EstimateReceptor } from '../../../../shared/schemas/estimate';
import type { EstimateResult, Paths, SecondOpinion } from '../../../../shared/schemas/estimate-result';
import { StatusWord, type StatusTone } from '../../../components/status-word';
import { writeTime, type Clock } from '../model/arrival-words';

const words: Record<SecondOpinion['agreement'], { word: string; tone: StatusTone }> = {
  agrees: { word: 'agrees', tone: 'neutral' },
  differs: { word: 'differs', tone: 'attention' },
  disagrees: { word: 'disagrees', tone: 'bad' },
  none: { word: 'none', tone: 'neutral' },
};

type Props = { result: EstimateResult | null; receptors: readonly EstimateReceptor[]; clock: Clock };

/** Whether a second method says the same, and what random paths tell of first arrivals. */
export function SecondOpinionView({ result, receptors, clock }: Props) {
  const opinion = result?.secondOpinion;
  if (!opinion) return <p className="text-note text-ink2">A second method is asked when the scenario is saved and run.</p>;
  return (
    <section aria-label="Second opinion" className="flex flex-col gap-2">
      <h3 className="flex flex-wrap items-baseline gap-2 font-semibold">
        Second opinion <StatusWord tone={words[opinion.agreement].tone}>{words[opinion.agreement].word}</StatusWord>
      </h3>
      <p>{opinion.words}</p>
      {opinion.field && <p className="text-note text-ink2">{`${formatNumber(100 * opinion.field.overlap)} % of both clouds lie in the same place at ${writeTime(clock, opinion.field.atS, 'early')!.elapsed}.`}</p>}
      {result.paths && result.paths.receptors.length > 0 && <FirstArrivals paths={result.paths} receptors={receptors} clock={clock} />}
      <p className="text-note text-ink2">{opinion.bounds.reason}</p>
    </section>
  );
}

function FirstArrivals({ paths, receptors, clock }: { paths: Paths; receptors: readonly EstimateReceptor[]; clock: Clock }) {
  const nameOf = (id: string) => receptors.find((receptor) => receptor.id === id)?.code || receptors.find((receptor) => receptor.id === id)?.name || id;
  return (
    <>
      <p className="text-note text-ink2">{`First arrival of ${formatNumber(paths.count, 4)} random paths:`}</p>
      <ul className="list-none">
        {paths.receptors.map((one) => (
          <li key={one.receptorId} className="border-t border-rule py-1 text-note">
            <span className="font-semibold">{nameOf(one.receptorId)}</span>{' '}
            {`${formatNumber(100 * one.arriveShare)} ± ${formatNumber(100 * one.arriveShareError, 1)} % come ${one.counted}`}
            {one.firstArrivalS && `, half of those before ${writeTime(clock, one.firstArrivalS.p50, 'early')!.clock}, nine in ten between ${writeTime(clock, one.firstArrivalS.p5, 'early')!.clock} and ${writeTime(clock, one.firstArrivalS.p95, 'late')!.clock}`}
          </li>
        ))}
      </ul>
    </>
  );
}
