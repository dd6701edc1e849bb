import { simpleParser, type ParsedMail } from 'mailparser'
import { SMTPServer } from 'smtp-server'

export interface MailServer { readonly received: ParsedMail[], readonly stop: () => Promise<void>, readonly waitFor: (address: string) => Promise<ParsedMail> }

const addressesOf = (message: ParsedMail) => [message.to ?? []].flat().flatMap(each => each.value.map(one => one.address))

/** A mail server that keeps what it gets, as an independent reader understands it. */
export async function startMailServer(port: number): Promise<MailServer> {
  const received: ParsedMail[] = []
  const server = new SMTPServer({
    authOptional: true, disabledCommands: ['STARTTLS'],
    onData: (stream, _session, done) => {
      simpleParser(stream).then((message) => {
        received.push(message)
        done()
      }, done)
    },
  })
  await new Promise<void>(listening => server.listen(port, '127.0.0.1', listening))
  return {
    received,
    stop: () => new Promise<void>(closed => server.close(closed)),
    waitFor: async (address) => {
      for (let tries = 0; tries < 100; tries++) {
        const found = received.find(message => addressesOf(message).includes(address))
        if (found) return found
        await new Promise(done => setTimeout(done, 50))
      }
      throw new Error(`no message to ${address} came`)
    },
  }
}
