import { defineStore } from 'pinia'
import { ref, shallowRef } from 'vue'
import type { NewTuning, OwnTuning, OwnTuningList, PatchTuning, TuningCreated } from '#shared/schemas/tuning'

type Request = <T>(url: string, options?: { method?: 'POST' | 'PATCH' | 'DELETE', body?: object }) => Promise<T>
/** Nuxt's own request function, which carries the session on the server as well. */
const request: Request = (url, options) => $fetch(url, options)

const byName = (a: OwnTuning, b: OwnTuning) => a.name.localeCompare(b.name, 'en')

/** The tunings that I keep under names of my own. Deleting shows at once; when the server refuses, it is put back and the refusal thrown. */
export const useOwnTunings = defineStore('own-tunings', () => {
  const items = shallowRef<readonly OwnTuning[]>([])
  /** The last one deleted, while it can be taken back by one press. */
  const deleted = ref<OwnTuning | null>(null)
  const without = (id: string) => items.value.filter(item => item.id !== id)
  const put = (item: OwnTuning) => (items.value = [...without(item.id), item].sort(byName))

  /** @param get answers requests; on the server the one that carries the person's session */
  async function load(get: Request = request) {
    items.value = (await get<OwnTuningList>('/api/tunings')).items
  }
  async function create(body: NewTuning) {
    const { id } = await request<TuningCreated>('/api/tunings', { method: 'POST', body })
    put({ id, notes: '', ...body, changedAt: new Date().toISOString() })
  }
  async function patch(item: OwnTuning, change: PatchTuning) {
    await request(`/api/tunings/${item.id}`, { method: 'PATCH', body: change })
    put({ ...item, ...change, changedAt: new Date().toISOString() })
  }
  async function remove(item: OwnTuning) {
    items.value = without(item.id)
    try {
      await request(`/api/tunings/${item.id}`, { method: 'DELETE' })
      deleted.value = item
    }
    catch (error) {
      put(item)
      throw error
    }
  }
  async function restore(item: OwnTuning) {
    await request(`/api/tunings/${item.id}/restore`, { method: 'POST' })
    put(item)
    deleted.value = null
  }
  return { items, deleted, load, create, patch, remove, restore }
})
