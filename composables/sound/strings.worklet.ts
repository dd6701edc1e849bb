import { createEnsemble } from '#shared/sound'
import { PROCESSOR, type FromStrings, type ToStrings } from './messages'

/** What the Web Audio API gives to the scope of a worklet. */
declare const sampleRate: number
declare class AudioWorkletProcessor { readonly port: MessagePort }
declare function registerProcessor(name: string, processor: new () => AudioWorkletProcessor): void

/** Blocks of 128 samples between two reports; about 23 ms at 44.1 kHz, finer than a frame pair is seen. */
const BLOCKS_BETWEEN_REPORTS = 8

/** Runs the strings on the audio thread, so that a busy page neither delays nor interrupts them. */
class StringsProcessor extends AudioWorkletProcessor {
  private readonly ensemble = createEnsemble(sampleRate)
  private blocks = 0
  private isPlaying = false

  constructor() {
    super()
    this.port.onmessage = ({ data }: MessageEvent<ToStrings>) => this.obey(data)
  }

  private obey(message: ToStrings): void {
    const { ensemble } = this
    switch (message.kind) {
      case 'sound': return ensemble.sound(message.notes)
      case 'rate': return ensemble.setRate(message.rate)
      case 'click': return ensemble.setClick(message.click)
      case 'stop':
        this.isPlaying = false
        return ensemble.stop()
      case 'play':
        this.isPlaying = true
        return ensemble.play(message.schedule, message.rate, message.click)
    }
  }

  process(_inputs: Float32Array[][], outputs: Float32Array[][]): boolean {
    const [first, ...others] = outputs[0] ?? []
    if (!first) return true
    this.ensemble.process(first)
    for (const channel of others) channel.set(first)
    if (this.isPlaying && ++this.blocks % BLOCKS_BETWEEN_REPORTS === 0) this.report()
    return true
  }

  private report(): void {
    const message: FromStrings = { position: this.ensemble.position() }
    this.isPlaying = message.position !== null
    this.port.postMessage(message)
  }
}

registerProcessor(PROCESSOR, StringsProcessor)
