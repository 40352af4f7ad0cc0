import { createHmac } from 'node:crypto'
import pg from 'pg'

/** Roles of every Notchwise database. The eraser cannot sign in: it owns one function. */
const roles = ['notchwise_owner', 'notchwise_app'] as const
export type SignInRole = (typeof roles)[number]

export interface Database {
  /** For migrations and for the seed. */
  ownerUrl: string
  /** For the server. */
  appUrl: string
}

/** Makes roles and database when they are missing; the passwords follow from the cluster's own secret. */
export async function ensureDatabase(
  setupUrl: (database: string) => string,
  name: string,
): Promise<Database> {
  const secret = new URL(setupUrl('postgres')).password
  const passwordOf = (role: SignInRole) => createHmac('sha256', secret).update(role).digest('base64url')
  const admin = new pg.Client({ connectionString: setupUrl('postgres') })
  await admin.connect()
  try {
    await admin.query('select pg_advisory_lock(724000)')
    for (const role of roles)
      await ensureRole(admin, role, `login password ${pg.escapeLiteral(passwordOf(role))}`)
    await ensureRole(admin, 'notchwise_eraser', 'nologin')
    await admin.query('grant notchwise_eraser to notchwise_owner')
    const { rowCount } = await admin.query('select from pg_database where datname = $1', [name])
    if (!rowCount) await admin.query(`create database ${pg.escapeIdentifier(name)} owner notchwise_owner`)
    await admin.query(`revoke connect on database ${pg.escapeIdentifier(name)} from public`)
    await admin.query(`grant connect on database ${pg.escapeIdentifier(name)} to notchwise_app`)
  } finally {
    await admin.end()
  }
  return { ownerUrl: as('notchwise_owner'), appUrl: as('notchwise_app') }

  function as(role: SignInRole): string {
    const url = new URL(setupUrl(name))
    url.username = role
    url.password = passwordOf(role)
    return url.href
  }
}

async function ensureRole(admin: pg.Client, role: string, options: string) {
  const { rowCount } = await admin.query('select from pg_roles where rolname = $1', [role])
  await admin.query(`${rowCount ? 'alter' : 'create'} role ${role} ${options}`)
}
