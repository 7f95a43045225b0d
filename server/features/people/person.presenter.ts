import type { Person } from '../../../shared/schemas/people';
import type { PersonRow } from '../../db/entities/person.entity';

export const presentPerson = (row: PersonRow): Person => ({
  id: row.id,
  name: row.name,
  email: row.email,
  roles: row.roles,
  phone: row.phone,
  licenceNumber: row.licenceNumber,
  isActive: row.isActive,
  hasPassword: row.passwordHash !== null,
  lastSignInAt: row.lastSignInAt,
  version: row.version,
});
