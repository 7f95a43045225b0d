import type { EstimateReceptor } from '../../../shared/schemas/estimate';
import type { Check } from '../../../shared/schemas/estimate-result';
import { openReceptorChecks, openRunChecks } from '../checks/open-checks';
import { checksBy, type Rule } from '../checks/rule';
import { lengthText, sig } from '../format';
import type { BoundedFacts, BoundedPlace } from './bounded-solver';
import { layerVolume, netInflow } from './bounded-water';
import { START_CELLS } from './bounded-run';

/** Rules of the closed form that do not concern a current laid out within its shore. */
const NOT_HERE = new Set(['weak-current', 'shore-current', 'tensor-askew']);
const WEAK_CURRENT_MPS = 0.02;
/** A measured current missed by more than this share of itself is told. */
const MISFIT = 0.3;
/** Closed water that gains or loses more than this share of itself is told. */
const GAIN = 0.02;
/** A receptor nearer than this many starting widths sees the start of the cloud. */
const START_WIDTHS = 4;

const runRules: readonly Rule<BoundedFacts>[] = [
  {
    code: 'weak-current',
    severity: 'warn',
    title: 'Hardly any current',
    test: ({ plan }) =>
      plan.fastestMps < WEAK_CURRENT_MPS
        ? { detail: `Nowhere in the water is the current faster than ${sig(plan.fastestMps, 2)} m/s.`, remedy: 'Direction and arrival are not known at this speed: measure the current, or add streams, wind and tide.' }
        : null,
  },
  {
    code: 'measured-missed',
    severity: 'warn',
    title: 'A measured current cannot be met',
    test({ plan }) {
      const worst = plan.flow.modes.fits.map((fit) => ({ fit, off: Math.hypot(fit.eastMps - fit.gotEastMps, fit.northMps - fit.gotNorthMps), speed: Math.hypot(fit.eastMps, fit.northMps) })).sort((a, b) => b.off - a.off)[0];
      return worst && worst.off > Math.max(0.005, MISFIT * worst.speed)
        ? { detail: `East ${sig(worst.fit.eastMps, 2)}, north ${sig(worst.fit.northMps, 2)} m/s was measured where the books of water allow east ${sig(worst.fit.gotEastMps, 2)}, north ${sig(worst.fit.gotNorthMps, 2)} m/s.`, remedy: 'Check the point, its time, the streams and the open edge: what flows past it has to come from somewhere.' }
        : null;
    },
  },
  {
    code: 'level-drift',
    severity: 'warn',
    title: 'Streams in and out differ',
    test({ plan, open }) {
      const shares = plan.water.isClosed.map((closed, number) => (closed ? (netInflow(plan.water, number) * open.input.doc.horizonS) / layerVolume(plan.water, number) : 0));
      const worst = shares.reduce((most, share) => (Math.abs(share) > Math.abs(most) ? share : most), 0);
      return Math.abs(worst) > GAIN ? { detail: `Over the estimate the mixed water changes by ${sig(100 * worst, 2)} %.`, remedy: 'Give the missing inflow or outflow if the level is held.' } : null;
    },
  },
  {
    code: 'stream-inlet',
    severity: 'note',
    title: 'Clean water comes in',
    test: ({ plan }) =>
      plan.water.openFaces.length > 0
        ? { detail: 'What leaves through the open edge does not come back with the flood.', remedy: 'Draw the edge farther out, beyond where the ebb carries the cloud, if it does.' }
        : null,
  },
  {
    code: 'left-out-on-grid',
    severity: 'note',
    title: 'Left out on the grid',
    test({ open }) {
      const { velocityGradient, vertical, straightShore } = open.water;
      const words = [...(velocityGradient ? ['the stated change of the current in space'] : []), ...(vertical ? ['slow mixing over depth'] : []), ...(straightShore ? ['the straight shore'] : [])];
      return words.length > 0 ? { detail: `The current and the shore come from the outline; ${words.join(' and ')} of the document ${words.length > 1 ? 'are' : 'is'} not used.`, remedy: 'Ask for the closed form where that matters more than the shore.' } : null;
    },
  },
  {
    code: 'cut-off-water',
    severity: 'note',
    title: 'Parts of the water are too narrow for the grid',
    test({ plan }) {
      const cells = plan.water.isCutOff.reduce((sum, mark) => sum + mark, 0);
      return cells > 0
        ? { detail: `${sig((cells * plan.water.grid.dxM ** 2) / 1e6, 2)} km² have no way to a release on cells of ${lengthText(plan.water.grid.dxM)}.`, remedy: 'There is no estimate there; draw the passage wider if water passes.' }
        : null;
    },
  },
  {
    code: 'grid-start',
    severity: 'note',
    title: 'The first cloud is as wide as the grid can carry',
    test({ plan, open }) {
      const start = Math.max(...open.input.releases.map(({ profile, release }) => (START_CELLS[profile.isInstant ? 'instant' : 'lasting'] * plan.water.grid.dxM) / Math.max(1e-9, release.initialRadiusM / 2)));
      return start > 1
        ? { detail: `It starts with a standard deviation of ${lengthText(START_CELLS.instant * plan.water.grid.dxM)} at most (cells of ${lengthText(plan.water.grid.dxM)}).`, remedy: 'Near the release the true peak is higher and narrower; the closed form tells it where no shore is near.' }
        : null;
    },
  },
];

type ReceptorFacts = BoundedFacts & { readonly place: BoundedPlace };
const receptorRules: readonly Rule<ReceptorFacts>[] = [
  {
    code: 'grid-near',
    severity: 'warn',
    title: 'Within the first width of the cloud',
    test({ plan, place }) {
      const least = START_WIDTHS * START_CELLS.instant * plan.water.grid.dxM;
      return place.distanceM < least ? { detail: `${lengthText(place.distanceM)} from the release; on this grid the cloud starts spread over ${lengthText(least)}.`, remedy: 'Peak and arrival are smeared here: ask for the closed form as well, or draw a smaller part of the water.' } : null;
    },
  },
];

export const boundedRunChecks = (facts: BoundedFacts): Check[] => [...checksBy(runRules, facts, null), ...openRunChecks(facts.open).filter((check) => !NOT_HERE.has(check.code))];

export const boundedReceptorChecks = (facts: BoundedFacts, receptor: EstimateReceptor, place: BoundedPlace): Check[] => [
  ...checksBy(receptorRules, { ...facts, place }, receptor.id),
  ...openReceptorChecks({ ...facts.open, receptor, distanceM: place.distanceM, movedM: place.movedM }),
];
