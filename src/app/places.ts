import { allows, type Action, type Role } from '../../shared/permissions';

export type Place = { to: string; label: string; action: Action };

/** The places of the product, in the order in which a shift uses them. */
export const incidentPlaces: readonly Place[] = [
  { to: '/', label: 'Watch', action: 'incident:read' },
  { to: '/incidents', label: 'Incidents', action: 'incident:read' },
];
export const registerPlaces: readonly Place[] = [
  { to: '/waters', label: 'Waters', action: 'register:read' },
  { to: '/receptors', label: 'Receptors', action: 'register:read' },
  { to: '/sources', label: 'Sources', action: 'register:read' },
  { to: '/substances', label: 'Substances', action: 'register:read' },
  { to: '/stations', label: 'Stations', action: 'register:read' },
];
export const officePlaces: readonly Place[] = [
  { to: '/office/people', label: 'People', action: 'person:read' },
  { to: '/office/outbox', label: 'Outbox', action: 'outbox:read' },
  { to: '/office/audit', label: 'Audit trail', action: 'audit:read' },
];

export const openTo = (places: readonly Place[], roles: readonly Role[]): Place[] => places.filter((place) => allows(roles, place.action));

/** Where a person starts: the Watch, or the first place that is theirs. */
export const homeOf = (roles: readonly Role[]): string => openTo([...incidentPlaces, ...officePlaces, ...registerPlaces], roles)[0]?.to ?? '/account';

export const isAt = (place: Place, pathname: string): boolean => (place.to === '/' ? pathname === '/' : pathname === place.to || pathname.startsWith(`${place.to}/`));
