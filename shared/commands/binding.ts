export type Modifier = 'Mod' | 'Jump' | 'Shift'
export interface Binding { readonly held: readonly Modifier[], readonly key: string }

/** "Mod+Shift+k" as its parts; "+" is a key too. */
export function readBinding(text: string): Binding {
  const [, held, key] = /^((?:(?:Mod|Jump|Shift)\+)*)(.+)$/s.exec(text)!
  return { held: held!.split('+').filter(Boolean) as Modifier[], key: key! }
}
