import { expect, it } from 'vitest'
import { nextTick, ref, shallowRef } from 'vue'
import { emptyDraft } from '../../../../../src/components/bench/readDraft'
import { useBenchWork } from '../../../../../src/components/bench/useBenchWork'
import type { TicketDesk } from '../../../../../src/composables/useTicket'

/** A ticket of which nothing was read. */
function aDesk() {
  const fitting = shallowRef<{ id: string } | null>(null)
  const desk = {
    fitting,
    target: shallowRef(null),
    drafts: ref({ left: emptyDraft(), right: emptyDraft() }),
    settled: () => null,
  }
  return { fitting, work: useBenchWork(desk as unknown as TicketDesk) }
}

it('takes the scanned ski in hand, though its ticket arrives after the scan', async () => {
  const { fitting, work } = aDesk()
  work.chooseOnOpening('second', 'right')
  fitting.value = { id: 'second' }
  await nextTick()
  expect(work.side.value).toBe('right')
})

it('starts the next ticket with its left ski: a scan counts for the ticket it opened', async () => {
  const { fitting, work } = aDesk()
  work.chooseOnOpening('second', 'right')
  for (const id of ['second', 'third']) {
    fitting.value = { id }
    await nextTick()
  }
  expect(work.side.value).toBe('left')
})
