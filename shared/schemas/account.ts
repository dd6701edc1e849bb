import { z } from 'zod'
import { text } from '../score/schema'
import type { AccountRole } from '../permissions'
import { PASSWORD_LENGTH } from './limits'

const emailSchema = z.string().trim().max(254).pipe(z.email('is no e-mail address')).transform(value => value.toLowerCase())
const passwordSchema = text(PASSWORD_LENGTH.most).min(PASSWORD_LENGTH.least, `needs at least ${PASSWORD_LENGTH.least} characters`)
const tokenSchema = z.string().regex(/^[\w-]{20,100}$/, 'is not a complete link')

export const registerSchema = z.strictObject({ name: text(80).trim().min(1, 'is empty'), email: emailSchema, password: passwordSchema })
export const confirmSchema = z.strictObject({ token: tokenSchema })
export const signInSchema = z.strictObject({ email: emailSchema, password: z.string().max(PASSWORD_LENGTH.most) })
export const forgotSchema = z.strictObject({ email: emailSchema })
export const resetSchema = z.strictObject({ token: tokenSchema, password: passwordSchema })
export const changePasswordSchema = z.strictObject({ current: z.string().max(PASSWORD_LENGTH.most), password: passwordSchema })

export type Register = z.infer<typeof registerSchema>

/** The person signed in, as the session carries it to the browser. */
export interface SessionUser { readonly id: string, readonly name: string, readonly email: string, readonly role: AccountRole }
export interface UserAnswer { readonly user: SessionUser }

/** One message of the local mailbox. */
export interface OutboxMessage { readonly id: string, readonly to: string, readonly subject: string, readonly text: string, readonly html: string, readonly sentAt: string }
export interface OutboxAnswer { readonly items: readonly OutboxMessage[] }
