type Undo = () => Promise<void> | void

/** What a request or a screen that does not let go may hold up the end. */
const patienceMs = 10_000

/** The end of a start: asked for by a signal or by the death of the process that began it, and what it undoes. */
export class Ending {
  readonly #controller = new AbortController()
  readonly #undo: Undo[] = []
  readonly signal = this.#controller.signal
  /** Fulfilled when the end is wanted. */
  readonly wanted = new Promise<void>((done) =>
    this.signal.addEventListener('abort', () => done(), { once: true }),
  )

  constructor() {
    const end = () => this.#controller.abort(new Error('Stopped before it was ready.'))
    for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP'] as const) process.on(signal, end)
    process.on('disconnect', end)
  }

  /** To be undone at the end, the latest first. */
  later(undo: Undo) {
    this.#undo.push(undo)
  }

  /** Waits for the work, or no longer than until the end is wanted. */
  async orEnd(work: Promise<void>) {
    await Promise.race([work, this.wanted])
  }

  async undo() {
    setTimeout(() => process.exit(1), patienceMs).unref()
    for (const undo of this.#undo.reverse()) await undo()
  }
}
