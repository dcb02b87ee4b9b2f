import { z } from 'zod';
import { ROLES } from '@/lib/fleet/rights';

/** Rules for passwords: length only, as long ones need nothing else. */
export const PASSWORD_LENGTH_MIN = 10;

const personId = z.uuid();
const name = z.string().trim().min(1, 'Enter a name.').max(80, 'At most 80 characters.');
const email = z
  .string()
  .trim()
  .toLowerCase()
  .max(200, 'At most 200 characters.')
  .pipe(z.email('Enter an e-mail address, like ada@workshop.example.'));
const newPassword = z
  .string()
  .min(PASSWORD_LENGTH_MIN, `At least ${PASSWORD_LENGTH_MIN} characters.`)
  .max(200, 'At most 200 characters.');
const roles = z
  .array(z.enum(ROLES))
  .min(1, 'Pick at least one role.')
  .transform((picked) => ROLES.filter((role) => picked.includes(role)));

export const addPersonSchema = z.object({ name, email, roles, password: newPassword });
export const changeRolesSchema = z.object({ personId, roles });
export const personIdSchema = z.object({ personId });
export const setPasswordSchema = z.object({ personId, password: newPassword });
export const firstOwnerSchema = z.object({
  workshopName: z.string().trim().min(1, 'Enter the workshop’s name.').max(80, 'At most 80 characters.'),
  name,
  email,
  password: newPassword,
});

/** Laxer than the rules for new ones: whatever does not fit is refused like any wrong password. */
export const signInSchema = z.object({
  email: z.string().trim().toLowerCase().max(200),
  password: z.string().max(200),
});

export const personDtoSchema = z.object({
  id: z.uuid(),
  name: z.string(),
  email: z.string(),
  roles: z.array(z.enum(ROLES)),
  disabledAt: z.iso.datetime().nullable(),
  createdAt: z.iso.datetime(),
});

export type PersonDto = z.infer<typeof personDtoSchema>;
