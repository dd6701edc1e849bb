import { computed, nextTick, ref } from 'vue'
import { problemOf, type Problem } from './problem'

export type Checks = Readonly<Record<string, () => string | undefined>>

/**
 * Sending a form: checks its fields first, is busy meanwhile, and keeps what the server refused.
 * Afterwards the first field with an error has the focus.
 * @param checks for each field one sentence saying what is wrong with it, or undefined
 */
export function useSubmit(checks: Checks, send: () => Promise<unknown>) {
  const busy = ref(false)
  const problem = ref<Problem | null>(null)
  const found = ref<Readonly<Record<string, string | undefined>>>({})
  const errors = computed(() => ({ ...found.value, ...(problem.value?.field && { [problem.value.field]: problem.value.message }) }))
  /** What belongs to no field of this form. */
  const general = computed(() => (problem.value && !(problem.value.field && problem.value.field in checks) ? problem.value : null))

  async function focusFirstError(form: EventTarget | null) {
    await nextTick()
    if (form instanceof HTMLElement) form.querySelector<HTMLElement>('[aria-invalid=true]')?.focus()
  }
  async function submit(event?: Event) {
    if (busy.value) return
    const form = event?.currentTarget ?? null
    problem.value = null
    found.value = Object.fromEntries(Object.entries(checks).map(([field, check]) => [field, check()]))
    if (Object.values(found.value).some(Boolean)) return focusFirstError(form)
    busy.value = true
    try {
      await send()
    }
    catch (error) {
      problem.value = problemOf(error)
      await focusFirstError(form)
    }
    finally {
      busy.value = false
    }
  }
  return { busy, problem, errors, general, submit }
}
