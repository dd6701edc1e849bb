import { inject, type ComputedRef, type InjectionKey } from 'vue'
import type { ArrangementRole } from '#shared/permissions'

/** The arrangement that is open, with my part in it (null until it is known) and whether the server has all of my work. */
export interface ArrangementHere { readonly id: string, readonly role: ArrangementRole | null, readonly isSaved: boolean }

export const HERE: InjectionKey<ComputedRef<ArrangementHere>> = Symbol('arrangement')

/** For the places of an arrangement. @throws Error outside of them */
export function useArrangementHere(): ComputedRef<ArrangementHere> {
  const here = inject(HERE)
  if (!here) throw new Error('no arrangement around this')
  return here
}
