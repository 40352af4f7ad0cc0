import { spawn } from 'node:child_process'
import path from 'node:path'
import { root } from './clientBuild'

// The server with its demo shop, restarted on change, and Vite's own server before it on port 4320.
const programs = [
  [process.execPath, '--watch-path=server', '--watch-path=shared', '--import', 'tsx', 'server/bin/start.ts'],
  [process.execPath, path.join(root, 'node_modules/vite/bin/vite.js')],
] as const
const children = programs.map(([command, ...args]) => spawn(command, args, { cwd: root, stdio: 'inherit' }))
for (const child of children) child.once('exit', () => children.forEach((other) => other.kill('SIGTERM')))
for (const signal of ['SIGINT', 'SIGTERM'] as const) process.on(signal, () => undefined)
