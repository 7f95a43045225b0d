import type { z } from 'zod';
import type { RegisterData, RegisterName, receptorDataSchema, sourceDataSchema, stationDataSchema, substanceDataSchema, waterDataSchema } from '../../../../shared/schemas/registers';

type Written = {
  waters: z.input<typeof waterDataSchema>;
  receptors: z.input<typeof receptorDataSchema>;
  sources: z.input<typeof sourceDataSchema>;
  substances: z.input<typeof substanceDataSchema>;
  stations: z.input<typeof stationDataSchema>;
};

type Head = { id: string; code: string; name: string; ownerName: string; lastCheckedOn: string | null };
/** A register entry as it is written here, defaults left out. */
export type WrittenItem<R extends RegisterName> = Head & { data: Written[R] };
/** The same after its schema has filled in the defaults. */
export type SeedItem<R extends RegisterName> = Head & { data: RegisterData[R] };

export const INVENTED = 'Invented for the demonstration district';
/** Contacts of the demonstration reach nobody: example.org and 555 numbers. */
export const contact = (name: string, extension: string) => ({ name, phone: `000 555 ${extension}`, email: `${name.toLowerCase().replaceAll(/[^a-z]+/g, '.')}@example.org` });
