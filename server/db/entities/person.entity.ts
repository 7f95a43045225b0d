import { EntitySchema } from 'typeorm';
import type { Role } from '../../../shared/permissions';

export type PersonRow = {
  id: string;
  name: string;
  email: string;
  passwordHash: string | null;
  roles: Role[];
  phone: string;
  licenceNumber: string;
  isActive: boolean;
  lastSignInAt: string | null;
  createdAt: string;
  version: number;
};

export const PersonEntity = new EntitySchema<PersonRow>({
  name: 'Person',
  tableName: 'people',
  columns: {
    id: { type: 'text', primary: true },
    name: { type: 'text' },
    email: { type: 'text', unique: true },
    passwordHash: { type: 'text', nullable: true },
    roles: { type: 'simple-json' },
    phone: { type: 'text', default: '' },
    licenceNumber: { type: 'text', default: '' },
    isActive: { type: 'boolean', default: true },
    lastSignInAt: { type: 'text', nullable: true },
    createdAt: { type: 'text' },
    version: { type: 'integer', default: 1 },
  },
});

/** One-time links for invitations and resets. Only the token's SHA-256 is kept. */
export type OneTimeLinkRow = { id: string; tokenHash: string; purpose: 'invitation' | 'reset'; personId: string; createdAt: string; expiresAt: string; usedAt: string | null };

export const OneTimeLinkEntity = new EntitySchema<OneTimeLinkRow>({
  name: 'OneTimeLink',
  tableName: 'one_time_links',
  columns: {
    id: { type: 'text', primary: true },
    tokenHash: { type: 'text', unique: true },
    purpose: { type: 'text' },
    personId: { type: 'text' },
    createdAt: { type: 'text' },
    expiresAt: { type: 'text' },
    usedAt: { type: 'text', nullable: true },
  },
  indices: [{ columns: ['personId'] }],
  foreignKeys: [{ target: 'people', columnNames: ['personId'], referencedColumnNames: ['id'], onDelete: 'CASCADE' }],
});
