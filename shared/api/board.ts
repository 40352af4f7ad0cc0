import { z } from 'zod'
import { boardCatchUp, boardSnapshot } from '#shared/schemas/board'
import { id } from '#shared/schemas/common'
import { read } from './define'

/** The whole board. */
export const getBoard = read({ path: '/api/board', access: 'board.read', answer: boardSnapshot })

/** What happened after a number: events, or a snapshot when they are gone. */
export const getBoardSince = read({
  path: '/api/board/since/:seq',
  access: 'board.read',
  params: z.object({ seq: z.coerce.number().int().min(0) }),
  answer: boardCatchUp,
})

/** First name and initial of everybody on the board: read by staff screens on their own, never in an event. */
export const getBoardNames = read({
  path: '/api/board/names',
  access: 'renters.read',
  answer: z.object({ names: z.array(z.object({ rentalId: id, name: z.string() })) }),
})
