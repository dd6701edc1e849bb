/** Addresses in a message's text, in order, each once. Anything but http and https is left as text. */
export function linksIn(text: string): string[] {
  const found = text.match(/https?:\/\/[^\s<>"')\]]+/g) ?? []
  return [...new Set(found.map(link => link.replace(/[.,;:!?]+$/, '')))].filter(link => URL.canParse(link))
}
