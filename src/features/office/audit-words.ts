import type { Action } from '../../../shared/permissions';
import type { AuditEntry } from '../../../shared/schemas/office';

/** What was done, to be read after the name of who did it. */
export const auditWords: Record<string, string> = {
  'session.sign-in': 'signed in',
  'session.refuse': 'was refused at sign-in',
  'session.sign-out': 'signed out',
  'session.sign-out-everywhere': 'signed out everywhere',
  'session.password-change': 'changed the own password',
  'session.password-forgotten': 'asked for a new password',
  'session.password-set': 'set a password with a one-time link',
  'person.create': 'invited a person',
  'person.update': 'changed a person',
  'person.invite': 'sent a person a link',
  'person.make-administrator': 'made a person administrator',
  'person.retire-demo': 'closed a demonstration sign-in',
  'register.create': 'added a register entry',
  'register.update': 'changed a register entry',
  'register.check': 'marked a register entry as checked',
  'register.archive': 'archived a register entry',
  'register.restore': 'restored a register entry',
  'incident.create': 'opened an incident',
  'incident.update': 'changed an incident',
  'incident.close': 'closed an incident',
  'incident.reopen': 'reopened an incident',
  'incident.log': 'wrote in an incident log',
  'scenario.create': 'began a scenario',
  'scenario.rename': 'renamed a scenario',
  'scenario.draft': 'changed a draft',
  'revision.create': 'saved a revision',
  'run.create': 'started a run',
  'run.cancel': 'cancelled a run',
  'run.done': 'finished a run',
  'run.fail': 'lost a run to an error',
};

export const auditWord = (action: string): string => auditWords[action] ?? action.replace('.', ' ').replaceAll('-', ' ');

/** A hash is told apart by its first figures. */
const shortened = (text: string): string => (/^[0-9a-f]{64}$/.test(text) ? `${text.slice(0, 12)}…` : text);

const said = (value: unknown): string => {
  if (value === null || value === '') return 'nothing';
  if (typeof value === 'boolean') return value ? 'yes' : 'no';
  if (Array.isArray(value)) return value.length === 0 ? 'nothing' : value.map(said).join(', ');
  if (typeof value === 'object') return Object.entries(value).map(([key, part]) => `${words(key)} ${said(part)}`).join(', ');
  return shortened(String(value));
};
const words = (key: string): string => (key === 'email' ? 'e-mail' : key).replace(/([a-z])([A-Z])/g, '$1 $2').toLowerCase();
const isChange = (value: unknown): value is { from: unknown; to: unknown } => typeof value === 'object' && value !== null && 'from' in value && 'to' in value;

/** The particulars of an entry, a line each; ids are left to its link: "roles: planner, now engineer". */
export function auditLines(detail: AuditEntry['detail']): string[] {
  return Object.entries(detail).flatMap(([key, value]) => {
    if (key === 'changed' && typeof value === 'object' && value !== null && !Array.isArray(value)) return auditLines(value as AuditEntry['detail']);
    if (key.endsWith('Id') || (Array.isArray(value) && value.length === 0)) return [];
    return [`${words(key)}: ${isChange(value) ? `${said(value.from)}, now ${said(value.to)}` : said(value)}`];
  });
}

/** The page of what an entry is about, where it has one, and what it takes to read it. */
export function auditSubjectLink({ subjectKind, subjectId, detail }: AuditEntry): { to: string; words: string; action: Action } | null {
  if (subjectKind === 'incident') return { to: `/incidents/${subjectId}`, words: 'Open incident', action: 'incident:read' };
  if (subjectKind === 'scenario') return { to: `/scenarios/${subjectId}`, words: 'Open scenario', action: 'incident:read' };
  if (typeof detail['scenarioId'] === 'string') return { to: `/scenarios/${detail['scenarioId']}`, words: 'Open scenario', action: 'incident:read' };
  if (subjectKind === 'register' && typeof detail['register'] === 'string') return { to: `/${detail['register']}/${subjectId}`, words: 'Open entry', action: 'register:read' };
  return null;
}
