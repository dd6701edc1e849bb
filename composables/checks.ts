import { PASSWORD_LENGTH } from '#shared/schemas/limits'

/** Each answers one sentence for what is wrong, undefined for what may be sent. The server's schemas have the last word. */

export const emailCheck = (email: string): string | undefined =>
  /^[^\s@]+@[^\s@]+\.[^\s@]+$/.test(email.trim()) ? undefined : email.trim() ? 'This is no complete e-mail address, as in maren@example.org.' : 'Write your e-mail address.'

export const passwordCheck = (password: string): string | undefined =>
  password.length >= PASSWORD_LENGTH.least ? undefined : `A password has at least ${PASSWORD_LENGTH.least} characters; this has ${password.length}.`

export const presentCheck = (text: string, what: string): string | undefined => (text.trim() ? undefined : `Write ${what}.`)
