import type { Command } from '#shared/commands/registry'

const words = (text: string): string[] => text.toLowerCase().split(/[^\p{L}\p{N}]+/u).filter(Boolean)

/** How well one typed word fits a word of a title: at its start best, inside less, its letters in order least; 0 not at all. */
function fit(typed: string, word: string): number {
  if (word.startsWith(typed)) return word === typed ? 4 : 3
  if (word.includes(typed)) return 2
  let at = 0
  for (const letter of word) if (letter === typed[at]) at += 1
  return typed.length > 2 && at === typed.length ? 1 : 0
}

/** How well a command fits what was typed; 0 where a typed word fits nothing of it. */
export function score(command: Pick<Command, 'title' | 'group' | 'help'>, typed: string): number {
  const title = words(command.title)
  const all = [...title, ...words(command.group)]
  const help = words(command.help ?? '')
  let total = 0
  for (const each of words(typed)) {
    const best = Math.max(0, ...all.map((word, index) => fit(each, word) * (index < title.length ? 2 : 1) + (index === 0 && word.startsWith(each) ? 1 : 0)))
    // What the help says counts least, and by the beginnings of its words only.
    const found = best || (each.length > 2 && help.some(word => word.startsWith(each)) ? 1 : 0)
    if (!found) return 0
    total += found
  }
  return total
}

/** The commands that fit, best first; all of them in their own order while nothing is typed. */
export function findCommands(commands: readonly Command[], typed: string): readonly Command[] {
  if (!words(typed).length) return commands
  return commands.map(command => ({ command, value: score(command, typed) }))
    .filter(each => each.value > 0)
    .sort((a, b) => b.value - a.value)
    .map(each => each.command)
}
