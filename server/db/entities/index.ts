import { IncidentEntity, LogEntryEntity, RevisionEntity, RunEntity, RunFrameEntity, ScenarioEntity } from './incident.entities';
import { OneTimeLinkEntity, PersonEntity } from './person.entity';
import { AuditEntity, JobEntity, MailEntity } from './record.entities';
import { RegisterItemEntity, RegisterVersionEntity } from './register.entities';

export const entities = [
  PersonEntity,
  OneTimeLinkEntity,
  AuditEntity,
  MailEntity,
  JobEntity,
  RegisterItemEntity,
  RegisterVersionEntity,
  IncidentEntity,
  LogEntryEntity,
  ScenarioEntity,
  RevisionEntity,
  RunEntity,
  RunFrameEntity,
];
