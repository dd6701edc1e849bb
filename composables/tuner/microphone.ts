/** Why a microphone can't be used. */
export type MicrophoneProblem = 'refused' | 'absent' | 'in-use' | 'unsupported' | 'failed'

export class NoMicrophone extends Error {
  override readonly name = 'NoMicrophone'
  constructor(readonly problem: MicrophoneProblem) {
    super(problem)
  }
}

export interface Microphone {
  readonly rate: number
  /** The newest samples: fills as many as there is room for, a power of two up to 32768. */
  readonly read: (samples: Float32Array<ArrayBuffer>) => void
  readonly close: () => void
}

/** Names of what getUserMedia throws: Media Capture and Streams, W3C, §10.2. */
const PROBLEMS: Readonly<Record<string, MicrophoneProblem>> = {
  NotAllowedError: 'refused', SecurityError: 'refused', NotFoundError: 'absent', OverconstrainedError: 'absent', NotReadableError: 'in-use', AbortError: 'in-use',
}

/** Everything that is meant for speech takes a ringing string for noise and works against it. */
const AS_IT_SOUNDS: MediaStreamConstraints = { audio: { echoCancellation: false, noiseSuppression: false, autoGainControl: false, channelCount: { ideal: 1 } } }

async function ask(): Promise<MediaStream> {
  try {
    return await navigator.mediaDevices.getUserMedia(AS_IT_SOUNDS)
  }
  catch (error) {
    throw new NoMicrophone(PROBLEMS[error instanceof Error ? error.name : ''] ?? 'failed')
  }
}

/** Asks for the microphone and opens it. To be called while a key or click is handled.
 * @param ended called when it is taken away: unplugged, or stopped from the browser's own controls
 * @throws NoMicrophone */
export async function openMicrophone(ended: () => void): Promise<Microphone> {
  if (typeof AudioContext === 'undefined' || !('mediaDevices' in navigator)) throw new NoMicrophone('unsupported')
  // Before the question is put, while the click still counts as the person's wish.
  const context = new AudioContext()
  const closeContext = () => void (context.state !== 'closed' && context.close())
  const stream = await ask().catch((error: unknown) => {
    closeContext()
    throw error
  })
  const analyser = new AnalyserNode(context, { fftSize: 32_768 })
  const source = context.createMediaStreamSource(stream)
  source.connect(analyser)
  void context.resume()
  for (const track of stream.getTracks()) track.addEventListener('ended', ended)
  return {
    rate: context.sampleRate,
    read(samples) {
      if (analyser.fftSize !== samples.length) analyser.fftSize = samples.length
      analyser.getFloatTimeDomainData(samples)
    },
    close() {
      for (const track of stream.getTracks()) {
        track.removeEventListener('ended', ended)
        track.stop()
      }
      source.disconnect()
      closeContext()
    },
  }
}
