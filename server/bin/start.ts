import path from 'node:path'
import { environment, readConfig, type Config } from '../config'
import { migrateDatabase } from '../db/migrate'
import { seedDemo, type DemoSignIn } from '../db/seed/seedDemo'
import { startServer, type RunningServer } from '../index'
import { startCluster, type Cluster } from '../postgres/cluster'
import { keepCluster } from '../postgres/keep'
import { ensureDatabase } from '../postgres/roles'
import { openSetupCode } from '../services/setup'
import { addressProblem, shownUrl, wordsFor } from './address'
import { claimDataDir } from './claim'
import { buildClientIfStale, clientDir } from './clientBuild'
import { command } from './command'
import { makeDataDir, sessionSecret } from './dataDir'
import { Ending } from './ending'
import { step } from './progress'

/** PostgreSQL, schema, demo shop, client and server, in one command. */
await command(async () => {
  const config = readConfig(environment(), process.argv.slice(2))
  makeDataDir(config.dataDir)
  const ending = new Ending()
  try {
    await ending.orEnd(serve(config, ending))
    await ending.wanted
  } finally {
    if (ending.signal.aborted) console.log('Stopping ...')
    await ending.undo()
  }
})

async function serve(config: Config, ending: Ending) {
  const claim = claimDataDir(config.dataDir)
  ending.later(claim.release)
  const taken = config.port === 0 ? null : await addressProblem(config.host, config.port)
  if (taken) throw new Error(taken)

  const client = config.viteServes
    ? null
    : step('Building the client', () => buildClientIfStale(ending.signal))
  client?.catch(() => undefined)
  const clusterDir = path.join(config.dataDir, 'postgres')
  const cluster = await step('Starting PostgreSQL', () =>
    startCluster(clusterDir, { say: console.log, signal: ending.signal }),
  )
  const keeper = keepCluster(clusterDir, cluster, console.log)
  ending.later(keeper.stop)
  const { appUrl, signIns } = await prepareDatabase(config, cluster)
  await client
  ending.signal.throwIfAborted()
  const server = await listen(config, appUrl)
  ending.later(server.close)
  const url = shownUrl(config.host, server.port)
  claim.serves(url)
  await announce(config, url, server, signIns)
}

async function prepareDatabase(config: Config, cluster: Cluster) {
  const { ownerUrl, appUrl } = await ensureDatabase(cluster.setupUrl, config.database)
  await step('Bringing the database up to date', () => migrateDatabase(ownerUrl))
  if (!config.demo) return { appUrl, signIns: [] }
  const { signIns } = await step('Making the demo shop', () => seedDemo({ ownerUrl, today: new Date() }))
  return { appUrl, signIns }
}

async function listen(config: Config, databaseUrl: string): Promise<RunningServer> {
  try {
    return await startServer({
      databaseUrl,
      host: config.host,
      port: config.port,
      sessionSecret: sessionSecret(config.dataDir),
      secure: false,
      demo: config.demo,
      origins: [],
      clientDir: config.viteServes ? null : clientDir,
      logLevel: config.logLevel,
    })
  } catch (error) {
    const { code, syscall } = error as NodeJS.ErrnoException
    throw syscall === 'listen' && code ? new Error(wordsFor(code, config.host, config.port)) : error
  }
}

async function announce(config: Config, url: string, server: RunningServer, signIns: DemoSignIn[]) {
  if (config.lost.length > 0) console.log(`Without TLS, these are lost: ${config.lost.join('; ')}.`)
  if (config.demo) {
    const people = signIns.map(({ email, password, pin }) => `${email} ${password} (PIN ${pin})`).join(' · ')
    console.log(`Notchwise: ${url} · demo shop · sign in as ${people}`)
    return
  }
  const code = await openSetupCode(server.deps)
  console.log(`Notchwise: ${url}${code ? ` · open ${url}/setup and type this code once: ${code}` : ''}`)
}
