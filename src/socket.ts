import { io, type Socket } from 'socket.io-client'
import type { BoardEvent } from '#shared/schemas/board'

/** What the server sends. Nothing is sent up this way. */
export interface DownEvents {
  event: (event: BoardEvent) => void
  head: (head: { seq: number; at: string }) => void
}

/** The one connection of this tab; it tries again by itself. */
export function openSocket(): Socket<DownEvents, Record<string, never>> {
  return io({ autoConnect: false, transports: ['websocket', 'polling'], reconnectionDelayMax: 3000 })
}
