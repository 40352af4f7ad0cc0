import { shallowRef } from 'vue'
import type { BoardEvent } from '#shared/schemas/board'
import type { Command, CommandAnswer, Envelope } from '#shared/api/define'
import { ApiProblem, request } from './http'
import { newId } from './ids'

/**
 * The one way by which the client changes anything. Every command gets its id here, once per intent: sending it
 * again has no second effect, so an answer that was lost on the way is simply asked for again.
 */

export interface Waiting {
  path: string
  envelope: Envelope
}

/** Commands on their way. Offline work later gives another storage; nothing else changes. */
export interface OutboxStorage {
  put: (waiting: Waiting) => void
  remove: (id: string) => void
}

/** A command that could not be sent: nothing is known of its effect until `again` answers. */
export class NotSent extends Error {
  constructor(readonly again: () => Promise<CommandAnswer<unknown>>) {
    super('not sent')
  }
}

const pauses = [300, 1000, 2500]
const inMemory = new Map<string, Waiting>()
let storage: OutboxStorage = {
  put: (waiting) => void inMemory.set(waiting.envelope.id, waiting),
  remove: (id) => void inMemory.delete(id),
}
let seenSeq: () => number | null = () => null
let onEvent: (event: BoardEvent) => void = () => undefined
let clockOffsetMs = 0

/** How many commands are on their way or wait to be sent again. */
export const unsent = shallowRef(0)

/** The board's store says what it has seen and hears of the events that answers bring. */
export function connectOutbox(to: { seenSeq: () => number | null; onEvent: (event: BoardEvent) => void }) {
  seenSeq = to.seenSeq
  onEvent = to.onEvent
}

export function useOutboxStorage(other: OutboxStorage) {
  storage = other
}

/** Difference between the server's clock and this device's, measured at each contact, in milliseconds. */
export function noteServerTime(serverTime: Date, now: Date) {
  clockOffsetMs = serverTime.getTime() - now.getTime()
}

/** What of a command is needed to send it. The renter's phone gives its names only and leaves the schemas out. */
type Sendable<Body, Ids> = Pick<Command<string, Body, Ids>, 'kind' | 'path'> &
  Partial<Pick<Command<string, Body, Ids>, 'body' | 'ids'>>

/**
 * Sends a command and answers what it made. Refusals are thrown as `ApiProblem`; when the server cannot be reached
 * after a few tries, `NotSent` is thrown and its `again` sends the very same command.
 */
export function sendCommand<Body, Ids>(
  command: Sendable<Body, Ids>,
  body: NoInfer<Body>,
  { pin, link }: { pin?: string; link?: string } = {},
): Promise<CommandAnswer<Ids>> {
  const envelope: Envelope<Body> = {
    id: newId(),
    occurredAt: new Date(Date.now() + clockOffsetMs).toISOString(),
    seenSeq: seenSeq(),
    kind: command.kind,
    body,
  }
  const headers: Record<string, string> = {}
  if (pin) headers['x-pin'] = pin
  if (link) headers['x-renter-link'] = link
  const waiting = { path: command.path, envelope }
  storage.put(waiting)
  unsent.value += 1
  return deliver<Ids>(waiting, headers)
}

async function deliver<Ids>(waiting: Waiting, headers: Record<string, string>): Promise<CommandAnswer<Ids>> {
  for (let attempt = 0; ; attempt += 1) {
    try {
      const answer = await request<CommandAnswer<Ids>>('POST', waiting.path, {
        body: waiting.envelope,
        headers,
      })
      settled(waiting)
      if (answer.event) onEvent(answer.event)
      return answer
    } catch (error) {
      if (!mayComeLater(error)) {
        settled(waiting)
        throw error
      }
      const pause = pauses[attempt]
      if (pause === undefined) throw new NotSent(() => deliver(waiting, headers))
      await new Promise((resume) => setTimeout(resume, pause))
    }
  }
}

function settled(waiting: Waiting) {
  storage.remove(waiting.envelope.id)
  unsent.value -= 1
}

/** No answer, or an answer that says "not now": the command is still ours to send. */
function mayComeLater(error: unknown): boolean {
  return error instanceof ApiProblem
    ? error.status === 0 || error.status === 503 || error.status === 502
    : false
}
