import { eq } from 'drizzle-orm'
import type { Db } from '../db/client'
import { arrangements, members, settings, users } from '../db/schema'
import { createArrangement, setState } from './arrangements'
import { demoPieces } from './demoPieces'

/** Invented people. The password is printed at the start and is no secret: the demo is for a server of one's own. */
export const DEMO_PASSWORD = 'saltmarsh-road'
export const DEMO_PEOPLE = {
  maren: { name: 'Maren Holt', email: 'maren.holt@example.com' },
  ines: { name: 'Ines Okafor', email: 'ines.okafor@example.com' },
  teo: { name: 'Teo Lindqvist', email: 'teo.lindqvist@example.com' },
} as const

async function isLaidOut(db: Db): Promise<boolean> {
  return (await db.select().from(settings).where(eq(settings.key, 'demo'))).length > 0
}

/** Lays the demo out, once in the life of a database: what people do with it afterwards stays. */
export async function layOutDemo(db: Db, hash: (password: string) => Promise<string>): Promise<void> {
  if (await isLaidOut(db)) return
  const passwordHash = await hash(DEMO_PASSWORD)
  await db.transaction(async (tx) => {
    const person = async ({ name, email }: { name: string, email: string }) =>
      (await tx.insert(users).values({ name, email, passwordHash, confirmedAt: new Date() }).onConflictDoUpdate({ target: users.email, set: { name } }).returning({ id: users.id }))[0]!.id
    const maren = await person(DEMO_PEOPLE.maren)
    const ines = await person(DEMO_PEOPLE.ines)
    const teo = await person(DEMO_PEOPLE.teo)
    const pieces = demoPieces()
    await createArrangement(tx, maren, pieces.lowWater)
    await createArrangement(tx, maren, pieces.gullsOverHay)
    await setState(tx, await createArrangement(tx, ines, pieces.lanternWaltz), 'ready')
    const road = await createArrangement(tx, maren, pieces.saltmarshRoad)
    await tx.insert(members).values([{ arrangementId: road, userId: ines, role: 'co-arranger' }, { arrangementId: road, userId: teo, role: 'performer' }])
    // One transaction has one time; the folio shall show the piece to begin with at the top.
    await tx.update(arrangements).set({ changedAt: new Date() }).where(eq(arrangements.id, road))
    await tx.insert(settings).values({ key: 'demo', value: { laidOutAt: new Date().toISOString() } })
  })
}
