import net from 'node:net'
import { describe, expect, it, onTestFinished } from 'vitest'
import { addressProblem, shownUrl, wordsFor } from '../../../../server/bin/address'

describe('an address to serve on', () => {
  it('that another program holds is named with its port', async () => {
    const holder = net.createServer()
    await new Promise<void>((done) => holder.listen(0, '127.0.0.1', done))
    onTestFinished(() => void holder.close())
    const { port } = holder.address() as net.AddressInfo
    expect(await addressProblem('127.0.0.1', port)).toContain(`Port ${port} on 127.0.0.1 is taken`)
  })

  it('that is free has no problem', async () => {
    expect(await addressProblem('127.0.0.1', 0)).toBeNull()
  })

  it('that is not this machine’s is said to be so', async () => {
    // 192.0.2.1 is kept for documentation (RFC 5737): no machine has it.
    expect(await addressProblem('192.0.2.1', 4310)).toContain(
      'HOST=192.0.2.1 is not an address of this machine',
    )
  })

  it('that only root may use leads to one that everybody may', () => {
    expect(wordsFor('EACCES', '127.0.0.1', 80)).toContain('PORT=4310')
  })

  it('is shown as a browser takes it', () => {
    expect(shownUrl('127.0.0.1', 4310)).toBe('http://127.0.0.1:4310')
    expect(shownUrl('::1', 4310)).toBe('http://[::1]:4310')
    expect(shownUrl('0.0.0.0', 4310)).not.toContain('0.0.0.0')
  })
})
