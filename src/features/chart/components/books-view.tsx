import type { ReactNode } from 'react';
import { formatEntered, formatNumber } from '../../../../shared/format';
import type { EstimateResult } from '../../../../shared/schemas/estimate-result';

/** Where the released amount is at the end of the estimate, and how finely it was solved. */
export function BooksView({ result }: { result: EstimateResult }) {
  const { diagnostics: books } = result;
  const unit = result.unit === 'kg/m3' ? 'kg' : 'organisms';
  const share = (amount: number): string => (books.massReleased > 0 ? ` (${formatNumber((100 * amount) / books.massReleased, 3)} %)` : '');
  const amount = (value: number): string => `${formatNumber(value, 4)} ${unit}${share(value)}`;
  return (
    <section>
      <h3 className="font-semibold">Books</h3>
      <dl className="text-note">
        <Line label="Released">{formatNumber(books.massReleased, 4)} {unit}</Line>
        <Line label="In the water">{amount(books.massInWater)}</Line>
        {books.lostBy?.map(({ process, amount: lost }) => <Line key={process} label={`Lost: ${process}`}>{amount(lost)}</Line>) ?? <Line label="Lost">{amount(books.massLost)}</Line>}
        <Line label="Left the estimate">{amount(books.massLeft)}</Line>
        <Line label="Not accounted for">{formatNumber(books.massResidual * 100)} %</Line>
        <Line label="Largest Courant number">{books.maxCourant === undefined || books.maxCourant === null ? 'none: a closed form takes no steps' : formatNumber(books.maxCourant, 3)}</Line>
        <Line label="Values set to zero or cut">{formatEntered(books.clippedValues ?? 0)}</Line>
        <Line label="Values capped at the solubility">{formatEntered(books.cappedValues)}</Line>
        <Line label="Error of the release-time integral">{formatNumber(books.quadratureError)}</Line>
        {books.resolution && <Line label="Resolution">{books.resolution.words}</Line>}
        <Line label="Method">{result.solver}, engine {result.engineVersion}, seed {result.seed}</Line>
      </dl>
    </section>
  );
}

function Line({ label, children }: { label: string; children: ReactNode }) {
  return (
    <div className="flex gap-4 border-b border-rule py-1 last:border-b-0">
      <dt className="w-64 shrink-0 text-ink2">{label}</dt>
      <dd className="max-w-prose">{children}</dd>
    </div>
  );
}
