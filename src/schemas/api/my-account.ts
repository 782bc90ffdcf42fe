import { z } from 'zod';
import { PASSWORD_MAX } from '../../domain/access/password';
import { id } from './now';
import { emailField, nameField } from './people';
import { myAccountFields } from '../../words/fields';

/** One's own account. Times ISO 8601 in UTC. */

const time = z.iso.datetime();
const password = z
  .string({ error: myAccountFields.enterPassword })
  .min(1, myAccountFields.enterPassword)
  .max(PASSWORD_MAX);
const newPassword = z
  .string({ error: myAccountFields.choosePassword })
  .min(1, myAccountFields.choosePassword)
  .max(1000, myAccountFields.passwordTooLong);
const code = z.string().trim().min(6, myAccountFields.sixDigits).max(20, myAccountFields.sixDigits);

export const accountPage = z.object({
  at: time,
  person: z.object({
    id,
    name: z.string(),
    email: z.string(),
    role: z.string(),
    organisation: z.string(),
    timeZone: z.string(),
  }),
  secondFactor: z.object({ since: time.nullable(), recoveryCodesLeft: z.int() }),
  sessions: z.array(
    z.object({
      key: z.string(),
      here: z.boolean(),
      createdAt: time,
      usedAt: time,
      expiresAt: time,
      address: z.string().nullable(),
      device: z.string(),
    }),
  ),
});
export type AccountPage = z.infer<typeof accountPage>;

export const changePasswordBody = z.strictObject({ current: password, password: newPassword });
export const changeEmailBody = z.strictObject({ current: password, email: emailField });
/** Without a key: all but this one. */
export const endSessionsBody = z.strictObject({ key: z.string().max(100).optional() });
export const beginSecondFactorBody = z.strictObject({ current: password });
export const confirmSecondFactorBody = z.strictObject({ code });
export const endSecondFactorBody = z.strictObject({ current: password });

export const beginSecondFactorReply = z.object({
  secret: z.string(), // base32, for typing in
  picture: z.string(), // SVG of the code that an authenticator reads
});
export type SecondFactorBegun = z.infer<typeof beginSecondFactorReply>;
export const confirmSecondFactorReply = z.object({ recoveryCodes: z.array(z.string()) });

export const acceptBody = z.strictObject({
  name: nameField,
  password: newPassword,
});
export const newPasswordBody = z.strictObject({ password: newPassword });
export const forgotBody = z.strictObject({ email: emailField });
