import { spawn } from 'node:child_process'
import { once } from 'node:events'
import path from 'node:path'
import { root } from './clientBuild'

// The server with its demo shop, restarted on change, and Vite's own server in front of it on port 4320.
const programs = [
  [
    ...['--watch-path=server', '--watch-path=shared', '--watch-preserve-output', '--import', 'tsx'],
    ...['server/bin/start.ts', '--vite-serves'],
  ],
  [path.join(root, 'node_modules/vite/bin/vite.js')],
]
const children = programs.map((args) => spawn(process.execPath, args, { cwd: root, stdio: 'inherit' }))
const endAll = () => children.forEach((child) => child.kill('SIGTERM'))
const ends = children.map((child) => once(child, 'exit').then(endAll))
for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP'] as const) process.on(signal, endAll)
process.on('disconnect', endAll)
await Promise.all(ends)
process.exit()
