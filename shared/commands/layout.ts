/** The characters of the US keyboard by KeyboardEvent.code (W3C UI Events KeyboardEvent code values), plain and with Shift. */
const US: Readonly<Record<string, string>> = {
  Backquote: '`~', Minus: '-_', Equal: '=+', BracketLeft: '[{', BracketRight: ']}', Backslash: '\\|',
  Semicolon: ';:', Quote: '\'"', Comma: ',<', Period: '.>', Slash: '/?', IntlBackslash: '<>',
}

/** The character of the US keyboard at a position, for layouts whose letters are not Latin; null where there is none. */
export function positionCharacter(code: string, shift: boolean): string | null {
  const letter = /^Key([A-Z])$/.exec(code)?.[1]
  return letter?.toLowerCase() ?? US[code]?.[shift ? 1 : 0] ?? null
}
