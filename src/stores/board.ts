import { computed, ref, shallowRef } from 'vue'
import { defineStore } from 'pinia'
import { applyEvent, boardFrom, type Board } from '#shared/board/board'
import type { BoardCatchUp, BoardEvent, BoardSnapshot } from '#shared/schemas/board'
import { connectOutbox, noteServerTime } from '../api/commands'
import { ApiProblem, request } from '../api/http'
import { openSocket } from '../socket'

/** A gap may close by itself within this: events of two commands can overtake each other. */
const gapPatienceMs = 250
/** The server says its head every five seconds; after two missed ones the picture is old and says so. */
const staleAfterMs = 12_000

/**
 * The live state of the shop. The database is the truth and the socket only makes it fast: whatever is missed is
 * fetched by sequence number, and without news the screen says how old it is.
 */
export const useBoardStore = defineStore('board', () => {
  const board = shallowRef<Board | null>(null)
  const heardAt = ref<number | null>(null)
  const tick = ref(Date.now())
  const connected = ref(false)
  const denied = ref(false)

  const socket = openSocket()
  let queue: BoardEvent[] = []
  let frame = 0
  let gapTimer: ReturnType<typeof setTimeout> | undefined
  let clock: ReturnType<typeof setInterval> | undefined
  let catching: Promise<void> | null = null

  const status = computed<'connecting' | 'live' | 'stale'>(() => {
    if (!board.value || heardAt.value === null) return 'connecting'
    return connected.value && tick.value - heardAt.value < staleAfterMs ? 'live' : 'stale'
  })
  /** The moment of which the picture is true: the last word from the server. */
  const asOf = computed(() => (heardAt.value === null ? null : new Date(heardAt.value)))

  function heard() {
    heardAt.value = Date.now()
    tick.value = heardAt.value
  }

  /** Events of one frame are drawn once. */
  function receive(event: BoardEvent) {
    queue.push(event)
    if (frame === 0) frame = requestAnimationFrame(drain)
  }

  function drain() {
    frame = 0
    if (!board.value) return
    let next = board.value
    const early: BoardEvent[] = []
    for (const event of queue.sort((a, b) => a.seq - b.seq)) {
      const applied = applyEvent(next, event)
      if (applied.gap) early.push(event)
      next = applied.board
    }
    queue = early
    board.value = next
    if (early.length > 0) gapTimer ??= setTimeout(() => void catchUp(), gapPatienceMs)
  }

  /** Asks for what was missed; one question at a time. */
  function catchUp(): Promise<void> {
    clearTimeout(gapTimer)
    gapTimer = undefined
    catching ??= fetchMissed()
      .then(heard)
      .catch((error: unknown) => {
        if (error instanceof ApiProblem && error.status === 401) stop()
      })
      .finally(() => (catching = null))
    return catching
  }

  async function fetchMissed() {
    if (!board.value) {
      board.value = boardFrom(await request<BoardSnapshot>('GET', '/api/board'))
    } else {
      const answer = await request<BoardCatchUp>('GET', `/api/board/since/${board.value.seq}`)
      if (answer.kind === 'snapshot') board.value = boardFrom(answer.snapshot)
      else queue.push(...answer.events)
    }
    drain()
  }

  socket.on('connect', () => {
    connected.value = true
    denied.value = false
    void catchUp()
  })
  socket.on('disconnect', (why) => {
    connected.value = false
    // The server ended this session's sockets: whether the person may come back is for the session to say.
    if (why === 'io server disconnect') denied.value = true
  })
  socket.on('event', (event) => {
    heard()
    receive(event)
  })
  socket.on('head', ({ seq, at }) => {
    heard()
    noteServerTime(new Date(at), new Date())
    if (board.value && seq > board.value.seq && queue.length === 0) void catchUp()
  })

  function start() {
    if (clock) return
    connectOutbox({ seenSeq: () => board.value?.seq ?? null, onEvent: receive })
    clock = setInterval(() => (tick.value = Date.now()), 1000)
    void catchUp()
    socket.connect()
  }

  function stop() {
    clearInterval(clock)
    clock = undefined
    socket.disconnect()
    board.value = null
    heardAt.value = null
    queue = []
  }

  return { board, status, asOf, denied, start, stop, catchUp, receive }
})
