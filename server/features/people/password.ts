import { hash, verify } from '@node-rs/argon2';
import { AppError } from '../../http/problems';

/** Argon2id with the first choice of the OWASP Password Storage Cheat Sheet (2023): 19 MiB, two passes, one lane. The library's default is Argon2id. */
const cost = { memoryCost: 19_456, timeCost: 2, parallelism: 1 } as const;
const MIN_DISTINCT = 5;

export const hashPassword = (password: string): Promise<string> => hash(password, cost);

let standIn: Promise<string> | undefined;

/** True when the password fits. Without a hash the same work is done against one that fits nothing, so that time tells nobody who is known here. */
export async function passwordFits(passwordHash: string | null, password: string): Promise<boolean> {
  standIn ??= hashPassword(crypto.randomUUID());
  const fits = await verify(passwordHash ?? (await standIn), password);
  return fits && passwordHash !== null;
}

/** Refuses what is long and still guessed first: one character over and over, one's own name or address. */
export function assertPasswordIsGood(password: string, person: { name: string; email: string }): void {
  const refuse = (message: string): never => {
    throw new AppError('bad-input', `newPassword: ${message}`, { errors: [{ path: 'newPassword', message }] });
  };
  const folded = password.trim().toLowerCase();
  if (new Set(folded).size < MIN_DISTINCT) refuse(`Only ${new Set(folded).size} different characters: use at least ${MIN_DISTINCT}`);
  if (folded === person.email || folded === person.name.toLowerCase()) refuse('This is your own name or address: choose something that nobody would try first');
}
