import { config } from './config'
import { database } from './database'
import { sendMail } from './mail'
import type { Letter } from './mailTexts'

/** Sends a letter as this server is set up to. */
export async function post(to: string, letter: Letter): Promise<void> {
  const { smtpUrl, mailFrom } = config()
  await sendMail(await database(), { smtpUrl, from: mailFrom }, to, letter)
}
