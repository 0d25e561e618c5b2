import { z } from 'zod'
import { emailSchema, requiredText, timeZoneSchema, tokenSchema } from './common'

/** Length over character classes, and no upper bound that a passphrase would meet. */
export const passwordSchema = z.string()
  .min(10, 'At least 10 characters.')
  .max(200, 'At most 200 characters.')

/** `POST /api/session`. No rules on the password here: old ones must go on working. */
export const signInSchema = z.object({
  email: emailSchema,
  password: z.string().min(1, 'Enter your password.').max(200, 'At most 200 characters.'),
})
export type SignIn = z.infer<typeof signInSchema>

/** `POST /api/accounts`. */
export const signUpSchema = z.object({
  name: requiredText(80, 'Enter your name.'),
  email: emailSchema,
  password: passwordSchema,
  /** Calendar day; decides whether a guardian must consent. */
  birthDate: z.iso.date('Enter your date of birth.'),
  handedness: z.enum(['right', 'left']),
  timeZone: timeZoneSchema,
})
export type SignUp = z.infer<typeof signUpSchema>

/** `POST /api/accounts/confirm`. */
export const confirmSchema = z.object({ token: tokenSchema })

/** `POST /api/password/forgot`. */
export const forgotSchema = z.object({ email: emailSchema })

/** `POST /api/password/reset`. */
export const resetSchema = z.object({ token: tokenSchema, password: passwordSchema })

/** `PUT /api/password`. */
export const changePasswordSchema = z.object({
  current: z.string().min(1, 'Enter your present password.').max(200, 'At most 200 characters.'),
  next: passwordSchema,
})

/** `PATCH /api/account`. */
export const accountSchema = z.object({
  name: requiredText(80, 'Enter your name.').optional(),
  timeZone: timeZoneSchema.optional(),
})

/** `POST /api/invites`. */
export const inviteSchema = z.object({
  email: emailSchema,
  role: z.enum(['coach', 'owner']),
})

/** `POST /api/invites/:token/accept`. */
export const acceptInviteSchema = z.object({
  name: requiredText(80, 'Enter your name.'),
  password: passwordSchema,
  timeZone: timeZoneSchema,
})
