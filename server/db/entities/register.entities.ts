import { EntitySchema } from 'typeorm';
import type { RegisterData, RegisterName } from '../../../shared/schemas/registers';

export type RegisterItemRow = {
  id: string;
  register: RegisterName;
  code: string;
  name: string;
  ownerName: string;
  lastCheckedOn: string | null;
  data: RegisterData[RegisterName];
  version: number;
  isArchived: boolean;
  updatedAt: string;
  updatedBy: string;
};

export const RegisterItemEntity = new EntitySchema<RegisterItemRow>({
  name: 'RegisterItem',
  tableName: 'register_items',
  columns: {
    id: { type: 'text', primary: true },
    register: { type: 'text' },
    code: { type: 'text' },
    name: { type: 'text' },
    ownerName: { type: 'text', default: '' },
    lastCheckedOn: { type: 'text', nullable: true },
    data: { type: 'simple-json' },
    version: { type: 'integer', default: 1 },
    isArchived: { type: 'boolean', default: false },
    updatedAt: { type: 'text' },
    updatedBy: { type: 'text' },
  },
  uniques: [{ columns: ['register', 'code'] }],
});

/** Every version ever stored, whole. */
export type RegisterVersionRow = { id: number; itemId: string; version: number; at: string; by: string; reason: string; code: string; name: string; content: Record<string, unknown> };

export const RegisterVersionEntity = new EntitySchema<RegisterVersionRow>({
  name: 'RegisterVersion',
  tableName: 'register_versions',
  columns: {
    id: { type: 'integer', primary: true, generated: 'increment' },
    itemId: { type: 'text' },
    version: { type: 'integer' },
    at: { type: 'text' },
    by: { type: 'text', name: 'changedBy' },
    reason: { type: 'text', default: '' },
    code: { type: 'text' },
    name: { type: 'text' },
    content: { type: 'simple-json' },
  },
  uniques: [{ columns: ['itemId', 'version'] }],
  foreignKeys: [{ target: 'register_items', columnNames: ['itemId'], referencedColumnNames: ['id'], onDelete: 'CASCADE' }],
});
