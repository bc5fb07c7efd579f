/** Bodies of /api/account: register, sign in, who am I. */
import { z } from 'zod'
import type { Role } from '../../permissions'
import { neutraliseText } from '../text'

/** Kept in lower case: mail in another case is the same account; a `+` part is kept. */
export const MailSchema = z.string().max(254, 'At most 254 characters.').transform(mail => mail.trim().toLowerCase())
  .pipe(z.string().regex(/^[^\s@]+@[^\s@]+\.[^\s@]+$/, 'A mail address has the form name@place.example.'))
export const PassPhraseSchema = z.string().min(12, 'At least 12 characters: a few words do well.').max(200, 'At most 200 characters.')
export const PersonNameSchema = z.string().transform(neutraliseText).pipe(z.string().min(1, 'A name is wanted here.').max(100, 'At most 100 characters.'))

/** POST /api/account/register → Me */
export const RegisterSchema = z.strictObject({ mail: MailSchema, name: PersonNameSchema, passPhrase: PassPhraseSchema })
/** POST /api/account/sign-in → Me. 401 with one and the same body for an unknown address and a wrong phrase. */
export const SignInSchema = z.strictObject({ mail: z.string().max(254), passPhrase: z.string().max(200) })

/** GET /api/account/me (401 when signed out) */
export interface Me {
  userId: string
  mail: string
  name: string
  benches: { benchId: string, name: string, role: Role }[]
  /** Only in the answer to a sign-in: wrong pass phrases since the one before. */
  failedSignIns?: { count: number, lastAt: string }
}
/** GET /api/account/sessions · DELETE /api/account/sessions (sign out everywhere) · POST /api/account/sign-out */
export interface SessionRow { sessionId: string, startedAt: string, lastSeenAt: string, agent: string, current: boolean }
