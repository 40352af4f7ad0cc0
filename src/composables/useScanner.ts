import { onBeforeUnmount, onMounted, shallowRef, type ShallowRef } from 'vue'
import { parseLabel, parseTyped, type ParsedLabel, type ParsedTyped } from '#shared/labels/labels'
import {
  looksLikeScan,
  noScan,
  scanStep,
  scanTiming,
  seeCode,
  type RecentCodes,
} from '#shared/labels/scanDetector'
import { useTones, type Tone } from './useTones'

/** A label as it came in: scanned, or typed by hand (which may lack the check character). */
export interface ScannedLabel {
  text: string
  parsed: ParsedLabel | ParsedTyped
  by: 'scanner' | 'hand'
}

/** What a screen made of it; the tone is played and both are shown and spoken. */
export interface ScanResult {
  tone: Tone
  message: string
}

export interface ScanEcho extends Partial<ScanResult> {
  text: string
  at: Date
  /** Until the screen has answered. */
  waiting: boolean
}

type Handler = (label: ScannedLabel) => ScanResult | Promise<ScanResult>

/** The screen, or the dialog over it, that takes scans now: the last one mounted. */
const takers: { label: (label: ScannedLabel) => void }[] = []
const typists: ((key: string) => void)[] = []

let state = noScan
let recent: RecentCodes = new Map()
let field: { element: HTMLInputElement | HTMLTextAreaElement; value: string } | null = null
let held: { key: string; timer: ReturnType<typeof setTimeout> }[] = []

const isField = (element: Element | null): element is HTMLInputElement | HTMLTextAreaElement =>
  element instanceof HTMLInputElement || element instanceof HTMLTextAreaElement

/** A scanner's keys belong to no field: what they wrote before they were known as a scan is taken out again. */
function restoreField() {
  if (!field) return
  const { element, value } = field
  field = null
  if (element.value === value) return
  element.value = value
  element.dispatchEvent(new Event('input', { bubbles: true }))
}

function onKey(event: KeyboardEvent) {
  const before = state
  const { state: after, scan } = scanStep(before, {
    code: event.code,
    key: event.key,
    atMs: event.timeStamp,
    withShortcutKey: event.ctrlKey || event.altKey || event.metaKey,
    repeat: event.repeat,
  })
  state = after
  if (after.text.length === 1) field = isField(event.target as Element) ? rememberField(event) : null
  if (scan) {
    // Neither the button in focus nor a form takes the scanner's Enter.
    event.preventDefault()
    event.stopImmediatePropagation()
    restoreField()
    dropHeldKeys()
    takers.at(-1)?.label({ text: scan.text, parsed: parseLabel(scan.text), by: 'scanner' })
    return
  }
  if (looksLikeScan(after)) {
    event.preventDefault()
    dropHeldKeys()
  } else holdKey(event)
}

function rememberField(event: KeyboardEvent) {
  const element = event.target as HTMLInputElement | HTMLTextAreaElement
  return { element, value: element.value }
}

/** A key goes to the number pad only when it is clear that no scanner sent it. */
function holdKey(event: KeyboardEvent) {
  if (typists.length === 0 || isField(event.target as Element)) return
  if (event.ctrlKey || event.altKey || event.metaKey) return
  const { key } = event
  const timer = setTimeout(() => {
    held = held.filter((one) => one.timer !== timer)
    typists.at(-1)?.(key)
  }, scanTiming.longestGapMs)
  held.push({ key, timer })
}

function dropHeldKeys() {
  held.forEach(({ timer }) => clearTimeout(timer))
  held = []
}

function listen() {
  if (takers.length + typists.length === 1) addEventListener('keydown', onKey, { capture: true })
}
function unlisten() {
  if (takers.length + typists.length === 0) removeEventListener('keydown', onKey, { capture: true })
}

/**
 * Takes the scans of the whole page while this component is there, wherever the focus is. The same code within two
 * seconds is "already scanned" and reaches no handler. `submit` takes what was typed by hand.
 */
export function useScanner(
  handler: Handler,
  { alreadyMessage }: { alreadyMessage: (text: string) => string },
): { last: ShallowRef<ScanEcho | null>; submit: (text: string) => void } {
  const last = shallowRef<ScanEcho | null>(null)
  const { play } = useTones()

  async function take(label: ScannedLabel) {
    const echo: ScanEcho = { text: label.text, at: new Date(), waiting: true }
    last.value = echo
    const result = await handler(label)
    if (last.value === echo) last.value = { ...echo, ...result, waiting: false }
    play(result.tone)
  }

  const taker = {
    label: (label: ScannedLabel) => {
      const seen = seeCode(recent, label.text, performance.now())
      recent = seen.recent
      if (!seen.already) return void take(label)
      last.value = {
        text: label.text,
        at: new Date(),
        tone: 'already',
        message: alreadyMessage(label.text),
        waiting: false,
      }
      play('already')
    },
  }

  onMounted(() => {
    takers.push(taker)
    listen()
  })
  onBeforeUnmount(() => {
    takers.splice(takers.indexOf(taker), 1)
    unlisten()
  })

  return { last, submit: (text) => void take({ text, parsed: parseTyped(text), by: 'hand' }) }
}

/** Single keys typed by hand outside any field, for number pads; a scanner's keys never arrive here. */
export function useTypedKeys(handler: (key: string) => void) {
  onMounted(() => {
    typists.push(handler)
    listen()
  })
  onBeforeUnmount(() => {
    typists.splice(typists.indexOf(handler), 1)
    unlisten()
  })
}
