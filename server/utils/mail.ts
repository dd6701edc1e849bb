import { desc } from 'drizzle-orm'
import { createTransport, type Transporter } from 'nodemailer'
import type { OutboxMessage } from '#shared/schemas/account'
import type { Db } from '../db/client'
import { mail } from '../db/schema'
import type { Letter } from './mailTexts'

export interface MailSettings { readonly smtpUrl: string | undefined, readonly from: string }

/** One transport to a server, so that connections are pooled. */
let transport: { readonly url: string, readonly transporter: Transporter } | undefined

function transporterFor(url: string): Transporter {
  if (transport?.url === url) return transport.transporter
  transport?.transporter.close()
  const transporter = createTransport({ url, pool: true, connectionTimeout: 10_000, greetingTimeout: 10_000, socketTimeout: 20_000 } as Parameters<typeof createTransport>[0])
  transport = { url, transporter }
  return transporter
}

/** Sends through the mail server, or lays the message into the local mailbox where none is set. Messages that went out are not kept: they hold links that open accounts. */
export async function sendMail(db: Db, settings: MailSettings, to: string, letter: Letter): Promise<void> {
  if (settings.smtpUrl) await transporterFor(settings.smtpUrl).sendMail({ from: settings.from, to: { name: '', address: to }, ...letter })
  else await db.insert(mail).values({ recipient: to, ...letter })
}

/** The newest first. */
export async function outbox(db: Db, most = 100): Promise<OutboxMessage[]> {
  const rows = await db.select().from(mail).orderBy(desc(mail.sentAt), desc(mail.id)).limit(most)
  return rows.map(({ id, recipient, subject, text, html, sentAt }) => ({ id, to: recipient, subject, text, html, sentAt: sentAt.toISOString() }))
}
