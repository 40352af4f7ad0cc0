import fs from 'node:fs'
import os from 'node:os'
import path from 'node:path'
import { onTestFinished } from 'vitest'

/** An empty folder for one test; it goes away with it. */
export function testFolder(): string {
  const folder = fs.mkdtempSync(path.join(os.tmpdir(), 'notchwise-'))
  onTestFinished(() => fs.rmSync(folder, { recursive: true, force: true }))
  return folder
}
