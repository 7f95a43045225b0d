import type { EntityManager } from 'typeorm';
import { AuditEntity } from './entities/record.entities';

export type AuditSubject = { kind: 'person' | 'session' | 'register' | 'incident' | 'scenario' | 'revision' | 'run' | 'mail'; id: string };

/** Writes an audit entry inside the transaction of the change it records. */
export class AuditTrail {
  constructor(private readonly now: () => Date) {}

  async record(tx: EntityManager, actor: { id: string | null; name: string }, action: string, subject: AuditSubject, detail: Record<string, unknown> = {}): Promise<void> {
    await tx.insert(AuditEntity, { at: this.now().toISOString(), personId: actor.id, personName: actor.name, action, subjectKind: subject.kind, subjectId: subject.id, detail: detail as object });
  }
}
