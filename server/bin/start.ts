import fs from 'node:fs'
import path from 'node:path'
import { setTimeout as pause } from 'node:timers/promises'
import { ConfigError, readConfig, type Config } from '../config'
import { migrateDatabase } from '../db/migrate'
import { seedDemo, type DemoSignIn } from '../db/seed/seedDemo'
import { startServer, type RunningServer } from '../index'
import { startCluster, type Cluster } from '../postgres/cluster'
import { ensureDatabase } from '../postgres/roles'
import { openSetupCode } from '../services/setup'
import { buildClientIfStale, clientDir } from './clientBuild'
import { step } from './progress'
import { forgetRunning, noteRunning, portIsTaken, runningStart, sessionSecret } from './running'

/** PostgreSQL, schema, demo shop, client and server, in one command. */
async function main() {
  const config = readConfig(process.env, process.argv.slice(2))
  fs.mkdirSync(config.dataDir, { recursive: true })
  const other = runningStart(config.dataDir)
  if (other) return refuse(`Notchwise already runs at ${other.url} (process ${other.pid}).`)
  if (config.port && (await portIsTaken(config.host, config.port))) {
    return refuse(
      `Port ${config.port} on ${config.host} is taken by another program. PORT=4311 npm start takes another one.`,
    )
  }
  noteRunning(config.dataDir, `http://${config.host}:${config.port}`)

  const ending = endBySignal()
  const client = step('Building the client', buildClientIfStale)
  client.catch(() => undefined)
  const cluster = await step('Starting PostgreSQL', () =>
    startCluster(clusterDir(config), { say: console.log }),
  )
  const { appUrl, signIns } = await prepareDatabase(config, cluster)
  await client
  const server = await startServer({
    databaseUrl: appUrl,
    host: config.host,
    port: config.port,
    sessionSecret: sessionSecret(config.dataDir),
    secure: false,
    demo: config.demo,
    origins: [],
    clientDir,
    logLevel: config.logLevel,
  })
  noteRunning(config.dataDir, server.url)
  await announce(config, server, signIns)

  const keeping = keepPostgres(config, cluster, ending.signal)
  await ending.wanted
  console.log('Stopping ...')
  await server.close()
  await (await keeping).stop()
  forgetRunning(config.dataDir)
}

const clusterDir = (config: Config) => path.join(config.dataDir, 'postgres')

async function prepareDatabase(config: Config, cluster: Cluster) {
  const { ownerUrl, appUrl } = await ensureDatabase(
    cluster.setupUrl,
    config.demo ? 'notchwise_demo' : 'notchwise_shop',
  )
  await step('Bringing the database up to date', () => migrateDatabase(ownerUrl))
  if (!config.demo) return { appUrl, signIns: [] }
  const { signIns } = await step('Making the demo shop', () => seedDemo({ ownerUrl, today: new Date() }))
  return { appUrl, signIns }
}

async function announce(config: Config, server: RunningServer, signIns: DemoSignIn[]) {
  if (config.lost.length > 0) {
    console.log(`Without TLS these do not work or are not safe on other machines: ${config.lost.join(', ')}.`)
  }
  if (config.demo) {
    const people = signIns.map(({ email, password }) => `${email} ${password}`).join(' · ')
    console.log(`Notchwise: ${server.url} · demo shop · sign in as ${people}`)
    return
  }
  const code = await openSetupCode(server.deps)
  console.log(
    `Notchwise: ${server.url}${code ? ` · open ${server.url}/setup and type this code once: ${code}` : ''}`,
  )
}

/** Brings a PostgreSQL that ended by itself back on the same port, waiting longer each time. */
async function keepPostgres(config: Config, first: Cluster, ending: AbortSignal): Promise<Cluster> {
  let cluster = first
  for (let wait = 250; !ending.aborted;) {
    const stopped = new Promise((done) => ending.addEventListener('abort', done, { once: true }))
    const startedAt = Date.now()
    await Promise.race([cluster.ended ?? watchAdopted(cluster, ending), stopped])
    if (ending.aborted) break
    if (Date.now() - startedAt > 60_000) wait = 250
    console.log(`PostgreSQL ended; starting it again in ${wait} ms.`)
    await pause(wait)
    wait = Math.min(wait * 2, 10_000)
    cluster = await startCluster(clusterDir(config), { port: cluster.port }).catch((error: unknown) => {
      console.error(error instanceof Error ? error.message : error)
      return { ...cluster, ended: Promise.resolve() }
    })
  }
  return cluster
}

/** A server that another start owned: when it is gone, ours follows. */
async function watchAdopted(cluster: Cluster, ending: AbortSignal) {
  while (!ending.aborted && (await portIsTaken('127.0.0.1', cluster.port))) await pause(1000)
}

function endBySignal() {
  const controller = new AbortController()
  const wanted = new Promise<void>((done) =>
    controller.signal.addEventListener('abort', () => done(), { once: true }),
  )
  for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP'] as const) process.on(signal, () => controller.abort())
  return { signal: controller.signal, wanted }
}

function refuse(sentence: string) {
  console.error(sentence)
  process.exitCode = 1
}

main().then(
  () => process.exit(),
  (error: unknown) => {
    console.error(error instanceof ConfigError || error instanceof Error ? error.message : error)
    process.exit(1)
  },
)
