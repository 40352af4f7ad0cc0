import { readonly, ref } from 'vue'

/** Three answers to a scan that differ in pitch, number and length. A tone never carries a message alone. */
export type Tone = 'taken' | 'already' | 'refused'

interface Note {
  hertz: number
  seconds: number
}

const tones: Record<Tone, Note[]> = {
  taken: [{ hertz: 1320, seconds: 0.09 }],
  already: [
    { hertz: 880, seconds: 0.06 },
    { hertz: 880, seconds: 0.06 },
  ],
  refused: [
    { hertz: 294, seconds: 0.16 },
    { hertz: 208, seconds: 0.28 },
  ],
}
const gapSeconds = 0.05
const loudness = 0.2

let audio: AudioContext | null = null
const blocked = ref(true)

/** Browsers keep sound back until somebody touched the page: the chip that says so calls this. */
async function unblock() {
  audio ??= new AudioContext()
  await audio.resume()
  blocked.value = audio.state !== 'running'
}

function play(tone: Tone) {
  if (!audio || audio.state !== 'running') return
  let at = audio.currentTime
  for (const note of tones[tone]) {
    const oscillator = audio.createOscillator()
    const gain = audio.createGain()
    oscillator.frequency.value = note.hertz
    gain.gain.setValueAtTime(loudness, at)
    gain.gain.exponentialRampToValueAtTime(0.001, at + note.seconds)
    oscillator.connect(gain).connect(audio.destination)
    oscillator.start(at)
    oscillator.stop(at + note.seconds)
    at += note.seconds + gapSeconds
  }
}

/** The shop's three tones, and whether the browser lets them be heard. */
export function useTones() {
  return { play, unblock, blocked: readonly(blocked) }
}

/** The first touch or key anywhere lets sound through; a scanner's keys count. */
export function listenForFirstTouch() {
  const events = ['pointerdown', 'keydown'] as const
  const first = () => {
    events.forEach((event) => removeEventListener(event, first))
    void unblock()
  }
  events.forEach((event) => addEventListener(event, first))
}
