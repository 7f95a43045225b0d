import { instantMs } from '../../../shared/civil';
import { markings, type Incident } from '../../../shared/schemas/incidents';

const firstArrivalMs = (incident: Incident): number => {
  const [first] = incident.nextArrivals;
  return first ? instantMs(first.earliestAt) : Number.POSITIVE_INFINITY;
};

/** What is real comes first, then exercises, then plans; within each the one whose next arrival is nearest. */
export const byUrgency = (a: Incident, b: Incident): number => {
  const byMarking = markings.indexOf(a.marking) - markings.indexOf(b.marking);
  if (byMarking !== 0) return byMarking;
  const left = firstArrivalMs(a);
  const right = firstArrivalMs(b);
  return left === right ? instantMs(b.openedAt) - instantMs(a.openedAt) : left < right ? -1 : 1;
};

/** Every word typed must stand somewhere in number, name, marking, summary or the person who opened it. */
export function matches(incident: Incident, typed: string): boolean {
  const text = `${incident.number} ${incident.name} ${incident.marking} ${incident.summary} ${incident.openedBy}`.toLowerCase();
  return typed.toLowerCase().split(/\s+/).every((word) => text.includes(word));
}
