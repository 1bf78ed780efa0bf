import * as z from 'zod';
import { utf8Length } from './utf8-length';

export const ROLES = ['firmware', 'qa', 'support', 'admin'] as const;
export const roleSchema = z.enum(ROLES);
export type Role = z.infer<typeof roleSchema>;

export const PASSWORD_MIN_CHARACTERS = 12;
/** bcrypt looks at the first 72 bytes only: longer passwords are refused rather than cut. */
export const PASSWORD_MAX_BYTES = 72;

export const newPasswordSchema = z
  .string()
  .min(PASSWORD_MIN_CHARACTERS, `at least ${PASSWORD_MIN_CHARACTERS} characters`)
  .refine((text) => utf8Length(text) <= PASSWORD_MAX_BYTES, `at most ${PASSWORD_MAX_BYTES} bytes`);

const email = z.string().trim().toLowerCase().max(254).pipe(z.email('not an e-mail address'));
const name = z.string().trim().min(1, 'a name is needed').max(100);
const linkToken = z.string().min(20).max(200);

export const signInSchema = z.strictObject({
  email: z.string().max(254),
  password: z.string().max(1000),
});
export type SignIn = z.infer<typeof signInSchema>;

export const passwordChangeSchema = z.strictObject({
  current: z.string().max(1000),
  next: newPasswordSchema,
});
export type PasswordChange = z.infer<typeof passwordChangeSchema>;

/** `name` and `email` are needed with the link that makes the first admin, and refused otherwise. */
export const passwordResetSchema = z.strictObject({
  token: linkToken,
  password: newPasswordSchema,
  name: name.optional(),
  email: email.optional(),
});
export type PasswordReset = z.input<typeof passwordResetSchema>;

export const resetCheckSchema = z.strictObject({ token: linkToken });

/** What a link is for; e-mail and name are null with the link of the first admin. */
export const resetStateSchema = z.object({
  purpose: z.enum(['first-admin', 'reset']),
  email: z.string().nullable(),
  name: z.string().nullable(),
  expiresAt: z.string(),
});
export type ResetState = z.infer<typeof resetStateSchema>;

export const resetLinkSchema = z.object({ url: z.string(), expiresAt: z.string() });
export type ResetLink = z.infer<typeof resetLinkSchema>;

export const newPersonSchema = z.strictObject({ email, name, role: roleSchema });
export type NewPerson = z.input<typeof newPersonSchema>;

export const personChangeSchema = z.strictObject({
  name: name.optional(),
  role: roleSchema.optional(),
  isActive: z.boolean().optional(),
});
export type PersonChange = z.input<typeof personChangeSchema>;

/** A person where only the name matters: who owns, made, asked. */
export const personRefSchema = z.object({ id: z.number().int(), name: z.string(), initials: z.string() });
export type PersonRef = z.infer<typeof personRefSchema>;

export const personSchema = personRefSchema.extend({
  email: z.string(),
  role: roleSchema,
  isActive: z.boolean(),
  /** False until the person has used a link to choose one. */
  hasPassword: z.boolean(),
  lastSeenAt: z.string().nullable(),
  createdAt: z.string(),
});
export type Person = z.infer<typeof personSchema>;

/** Bytes of JSON a person's preferences may take. */
export const PREFERENCES_MAX_BYTES = 16_384;

/** Theme, order of lanes and the like: whatever the client keeps per person. The server does not look inside. */
export const preferencesSchema = z
  .record(z.string().max(60), z.unknown())
  .refine((value) => utf8Length(JSON.stringify(value)) <= PREFERENCES_MAX_BYTES, 'too many preferences');
export type Preferences = z.infer<typeof preferencesSchema>;

export const accountSchema = personRefSchema.extend({
  email: z.string(),
  role: roleSchema,
  preferences: preferencesSchema,
});
export type Account = z.infer<typeof accountSchema>;

/** An access token of minutes. The refresh token travels in a cookie no script can read. */
export const sessionSchema = z.object({
  accessToken: z.string(),
  /** ISO 8601. */
  expiresAt: z.string(),
  account: accountSchema,
});
export type Session = z.infer<typeof sessionSchema>;

/** What the client needs to know before and beside everything else. */
export const workspaceSchema = z.object({
  name: z.string(),
  toolVersion: z.string(),
  uploadLimitBytes: z.number(),
});
export type Workspace = z.infer<typeof workspaceSchema>;
