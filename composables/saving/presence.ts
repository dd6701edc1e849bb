/** Which tabs are open: each holds a lock of its client's name, which the browser gives up with the tab, however it ends (Web Locks API, W3C). */

const lockName = (clientId: string): string => `copperwound-tab-${clientId}`
/** A reloaded page asks while its former self is just going (ms). */
const PATIENCE = 400

const locks = (): LockManager | undefined => (typeof navigator === 'undefined' ? undefined : navigator.locks)

/** Holds this tab's lock until the answer is called or the tab is gone. */
export function holdPresence(clientId: string): () => void {
  let release = () => {}
  const held = new Promise<void>(resolve => (release = resolve))
  void locks()?.request(lockName(clientId), () => held)
  return release
}

/** Whether a client's tab is open. Where the browser has no locks (an insecure address) none counts as open: what two tabs then both send has one sequence, and is saved once. */
export async function isPresent(clientId: string): Promise<boolean> {
  const manager = locks()
  if (!manager) return false
  const isHeld = async (): Promise<boolean> => (await manager.query()).held?.some(lock => lock.name === lockName(clientId)) ?? false
  const until = Date.now() + PATIENCE
  while (await isHeld()) {
    if (Date.now() > until) return true
    await new Promise(resolve => setTimeout(resolve, 50))
  }
  return false
}
