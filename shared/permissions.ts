import type { RegisterName } from './schemas/registers';

/** Which role may do what: the one table. The server enforces it on every route; the client shows only what it allows. */
export const roles = ['planner', 'engineer', 'supervisor', 'coordinator', 'administrator'] as const;
export type Role = (typeof roles)[number];

export const roleWords: Record<Role, { title: string; does: string }> = {
  planner: { title: 'Planner', does: 'sketches releases, runs forecasts, drafts briefings' },
  engineer: { title: 'Engineer', does: 'sets waters, coefficients, flows and currents' },
  supervisor: { title: 'Supervisor', does: 'opens and closes incidents, approves' },
  coordinator: { title: 'Field coordinator', does: 'reads forecasts and briefings, acknowledges, sends samples' },
  administrator: { title: 'Administrator', does: 'manages people and the installation' },
};

const everyone = [...roles];
export const permissions = {
  'session:use': everyone,
  'map:read': everyone,
  'register:read': everyone,
  'receptor:write': ['planner', 'engineer', 'supervisor'],
  'source:write': ['planner', 'engineer', 'supervisor'],
  'station:write': ['planner', 'engineer'],
  'water:write': ['engineer'],
  'substance:write': ['engineer'],
  'incident:read': ['planner', 'engineer', 'supervisor', 'coordinator'],
  'incident:create': ['planner', 'engineer', 'supervisor'],
  'incident:update': ['planner', 'engineer', 'supervisor'],
  'incident:close': ['supervisor'],
  'log:write': ['planner', 'engineer', 'supervisor', 'coordinator'],
  'scenario:write': ['planner', 'engineer'],
  'estimate:preview': ['planner', 'engineer', 'supervisor'],
  'run:create': ['planner', 'engineer'],
  'run:cancel': ['planner', 'engineer', 'supervisor'],
  'person:read': ['administrator', 'supervisor'],
  'person:write': ['administrator'],
  'outbox:read': ['administrator'],
  'audit:read': ['administrator', 'supervisor'],
} as const satisfies Record<string, readonly Role[]>;
export type Action = keyof typeof permissions;

export const allows = (held: readonly Role[], action: Action): boolean =>
  held.some((role) => (permissions[action] as readonly Role[]).includes(role));

/** What writing to each register needs. */
export const registerWriteActions = {
  waters: 'water:write',
  receptors: 'receptor:write',
  sources: 'source:write',
  substances: 'substance:write',
  stations: 'station:write',
} as const satisfies Record<RegisterName, Action>;
