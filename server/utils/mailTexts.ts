/** One message, as plain text and as HTML made from the same parts. */
export interface Letter { readonly subject: string, readonly text: string, readonly html: string }

const ESCAPES: Readonly<Record<string, string>> = { '&': '&amp;', '<': '&lt;', '>': '&gt;', '"': '&quot;', '\'': '&#39;' }
const escape = (value: string) => value.replace(/[&<>"']/g, character => ESCAPES[character]!)

interface Parts { readonly subject: string, readonly name: string, readonly before: string, readonly link: string, readonly linkText: string, readonly after: string }

/** A name is typed by whoever registers: one line, so that it can't pretend to be the message. */
const oneLine = (name: string) => name.replace(/\s+/g, ' ').trim()

function letter({ subject, name, before, link, linkText, after }: Parts): Letter {
  const greeting = `Hello ${oneLine(name)},`
  const paragraph = (content: string) => `<p style="margin:0 0 16px">${content}</p>`
  return {
    subject,
    text: `${greeting}\n\n${before}\n\n${link}\n\n${after}\n\nCopperwound\n`,
    html: `<!doctype html><html lang="en"><head><meta charset="utf-8"><title>${escape(subject)}</title></head>`
      + '<body style="margin:0;padding:32px;background:#f5efe4;color:#1f1b16;font:16px/1.5 Georgia,serif">'
      + paragraph(escape(greeting)) + paragraph(escape(before))
      + paragraph(`<a href="${escape(link)}" style="color:#8f3f12">${escape(linkText)}</a>`)
      + paragraph(escape(after)) + paragraph('Copperwound') + '</body></html>',
  }
}

export const confirmLetter = (name: string, link: string): Letter => letter({
  subject: 'Confirm your address', name, link, linkText: 'Confirm my address',
  before: 'someone, you we hope, has registered with this address at Copperwound. Confirm it and you are in. The link holds for one day and works once.',
  after: 'If it was not you, do nothing: without this link there is no account.',
})

export const knownLetter = (name: string, link: string): Letter => letter({
  subject: 'You have an account already', name, link, linkText: 'Choose a new password',
  before: 'someone has tried to register with this address, which has an account already. Sign in with your password; if it is lost, ask for a new one here.',
  after: 'If it was not you, there is nothing to do: your account is as it was.',
})

export const resetLetter = (name: string, link: string): Letter => letter({
  subject: 'Choose a new password', name, link, linkText: 'Choose a new password',
  before: 'a new password was asked for. The link holds for one hour and works once. Choosing a new password ends all sessions.',
  after: 'If it was not you, do nothing: the old password still holds.',
})

export const changedLetter = (name: string, link: string): Letter => letter({
  subject: 'Your password was changed', name, link, linkText: 'Ask for a new password',
  before: 'your password was changed just now. If it was you, all is well. If not, ask for a new one at once:',
  after: 'All other sessions were ended.',
})
