/** Verovio's packages come without types; what the tests use of them. */
declare module 'verovio/wasm' {
  export default function createVerovioModule(): Promise<unknown>
}
declare module 'verovio/esm' {
  export class VerovioToolkit {
    constructor(module: unknown)
    loadData(text: string): boolean | number
    /** A MIDI file in base64. */
    renderToMIDI(): string
    getMEI(): string
  }
}
