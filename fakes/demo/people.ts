import type { Role } from '#shared/types/people'
import type { Database } from '#server/database/client'
import { insertUser } from '#server/features/people/user.repository'
import { newId } from '#server/ids'

export const DEMO_PASSWORD = 'turfnote-demo'
export const DEMO_TIME_ZONE = 'Europe/London'

interface DemoAccount {
  key: string
  email: string
  name: string
  role: Role
  words: string
  coach?: { slug: string, about: string }
  student?: { birthDate: string, handedness: 'right' | 'left', limits: string }
}

/** Everybody is invented. */
export const DEMO_ACCOUNTS = [
  { key: 'owner', email: 'owner@demo.turfnote.test', name: 'Ines Calder', role: 'owner', words: 'owner of the studio' },
  {
    key: 'coach', email: 'coach@demo.turfnote.test', name: 'Mara Lindqvist', role: 'coach', words: 'coach',
    coach: { slug: 'mara-lindqvist', about: 'Irons and contact. I look at the last quarter second first.' },
  },
  {
    key: 'coach2', email: 'coach2@demo.turfnote.test', name: 'Tomas Abara', role: 'coach', words: 'coach',
    coach: { slug: 'tomas-abara', about: 'Driving, and everything inside sixty yards.' },
  },
  {
    key: 'student', email: 'student@demo.turfnote.test', name: 'Joel Osei', role: 'student', words: 'student, holds two reviews',
    student: { birthDate: '1986-04-02', handedness: 'right', limits: 'Stiff lower back in the morning.' },
  },
  {
    key: 'student2', email: 'student2@demo.turfnote.test', name: 'Priya Nand', role: 'student', words: 'student',
    student: { birthDate: '1979-11-23', handedness: 'right', limits: '' },
  },
  {
    key: 'student3', email: 'student3@demo.turfnote.test', name: 'Hana Sato', role: 'student', words: 'student, left-handed',
    student: { birthDate: '1994-07-15', handedness: 'left', limits: 'Left wrist, healed last year.' },
  },
  {
    key: 'junior', email: 'junior@demo.turfnote.test', name: 'Sam Keller', role: 'student', words: 'junior, a guardian agreed',
    student: { birthDate: '2012-09-09', handedness: 'right', limits: '' },
  },
  { key: 'guardian', email: 'guardian@demo.turfnote.test', name: 'Ruth Keller', role: 'guardian', words: 'guardian of the junior' },
] as const satisfies readonly DemoAccount[]

export type DemoKey = typeof DEMO_ACCOUNTS[number]['key']

/** Makes the studio and its people, all with one password, and tells their ids. */
export async function insertDemoPeople(db: Database, nowMs: number, passwordHash: string): Promise<Record<DemoKey, string>> {
  await db.insertInto('studio')
    .values({ id: 1, name: 'Fieldgate Golf', time_zone: DEMO_TIME_ZONE, currency: 'GBP', contact_email: 'hello@demo.turfnote.test' })
    .execute()
  const ids = new Map<string, string>()
  for (const account of DEMO_ACCOUNTS) ids.set(account.key, await insertAccount(db, account, nowMs, passwordHash))
  const idOf = (key: DemoKey): string => ids.get(key) ?? ''
  await insertGuardianship(db, { guardianId: idOf('guardian'), juniorId: idOf('junior'), nowMs })
  return {
    owner: idOf('owner'), coach: idOf('coach'), coach2: idOf('coach2'), student: idOf('student'), student2: idOf('student2'),
    student3: idOf('student3'), junior: idOf('junior'), guardian: idOf('guardian'),
  }
}

async function insertAccount(db: Database, account: DemoAccount, nowMs: number, passwordHash: string): Promise<string> {
  const id = newId(nowMs)
  await insertUser(db, {
    id, email: account.email, email_key: account.email, name: account.name, role: account.role, time_zone: DEMO_TIME_ZONE,
    password_hash: passwordHash, email_confirmed_at_ms: nowMs, created_at_ms: nowMs,
  })
  if (account.coach) {
    await db.insertInto('coaches').values({ user_id: id, slug: account.coach.slug, about: account.coach.about }).execute()
  }
  if (account.student) {
    const { birthDate, handedness, limits } = account.student
    await db.insertInto('students').values({ user_id: id, birth_date: birthDate, handedness, limits }).execute()
  }
  return id
}

async function insertGuardianship(db: Database, { guardianId, juniorId, nowMs }: { guardianId: string, juniorId: string, nowMs: number }): Promise<void> {
  await db.insertInto('guardianships').values({ guardian_id: guardianId, junior_id: juniorId, created_at_ms: nowMs }).execute()
  await db.insertInto('consents')
    .values({ id: newId(nowMs), junior_id: juniorId, guardian_id: guardianId, text_version: 'demo-1', given_at_ms: nowMs })
    .execute()
}
