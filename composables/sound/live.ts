// Tone's parts one by one: its index opens a context and a worker from a blob: address at once, which our content policy forbids,
// and with its own context it would load worklets from blob: addresses too. A native context given to Tone does neither.
import 'tone/build/esm/core/context/Destination.js'
import { Volume } from 'tone/build/esm/component/channel/Volume.js'
import { Context } from 'tone/build/esm/core/context/Context.js'
import { setContext } from 'tone/build/esm/core/context/GlobalContext.js'
import { connect } from 'tone/build/esm/core/context/ToneAudioNode.js'
import { PROCESSOR, type FromStrings, type ToStrings } from './messages'
import stringsUrl from './strings.worklet?worker&url'

/** The strings on this computer's loudspeakers. */
export interface LiveSound {
  readonly send: (message: ToStrings) => void
  /** 0 to 1; half of it is a quarter of the amplitude, which is nearer to how loudness is heard. */
  readonly setVolume: (volume: number) => void
  readonly isAwake: () => boolean
  /** Whether the browser lets sound out now; it may need a key or a click first. */
  readonly wake: () => Promise<boolean>
  readonly close: () => void
}

/** The browser has no audio, or not on this address. */
export class NoSound extends Error {
  override readonly name = 'NoSound'
}

/** How long a browser may take to start its audio before we say that it does not. */
const WAKE_MILLISECONDS = 1500

const decibels = (volume: number): number => 40 * Math.log10(Math.max(volume, 1e-4))

/** Opens the audio device.
 * @throws NoSound where there is none */
export async function openSound(volume: number, hear: (message: FromStrings) => void): Promise<LiveSound> {
  if (typeof AudioContext === 'undefined') throw new NoSound('This browser has no Web Audio.')
  if (typeof AudioWorkletNode === 'undefined') throw new NoSound('Audio worklets need a secure address.')
  const native = new AudioContext({ latencyHint: 'interactive' })
  const isAwake = () => native.state === 'running'
  // Asked for at once, while the key or click that led here still counts as the person's wish.
  const woken = native.resume()
  const context = new Context({ context: native, clockSource: 'timeout', lookAhead: 0 })
  setContext(context)
  await context.addAudioWorkletModule(stringsUrl).catch(async (error: unknown) => {
    await native.close()
    throw error
  })
  const strings = new AudioWorkletNode(native, PROCESSOR, { numberOfInputs: 0, outputChannelCount: [1] })
  const master = new Volume({ context, volume: decibels(volume) }).toDestination()
  connect(strings, master)
  strings.port.onmessage = ({ data }: MessageEvent<FromStrings>) => hear(data)

  return {
    send: message => strings.port.postMessage(message),
    isAwake,
    setVolume: (value) => { master.volume.rampTo(decibels(value), 0.05) },
    async wake() {
      if (!isAwake()) await Promise.race([native.resume().then(() => woken), new Promise(resolve => setTimeout(resolve, WAKE_MILLISECONDS))])
      return isAwake()
    },
    close() {
      strings.disconnect()
      context.dispose()
      if (native.state !== 'closed') void native.close()
    },
  }
}
