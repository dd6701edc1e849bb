import { quickLookup, quickMeasuring } from './quick'

export type Vex = typeof import('vexflow/core')

let loading: Promise<Vex> | null = null

/**
 * The drawing library and its music font, loaded when a sheet first needs them. Drawing before the font is there would
 * measure with a wrong one. Text on the sheet is Alegreya Sans, so the library's own text fonts are not fetched.
 * @throws when the chunk or the font can't be fetched; a later call tries again
 */
export function loadVex(): Promise<Vex> {
  loading ??= load().catch((problem: unknown) => {
    loading = null
    throw problem
  })
  return loading
}

async function load(): Promise<Vex> {
  const vex = await import('vexflow/core')
  await Promise.all([
    vex.Font.load('Bravura', '/fonts/bravura.woff2', { display: 'block' }),
    document.fonts.load('500 14.5px "Alegreya Sans"'),
  ])
  vex.VexFlow.setFonts('Bravura')
  vex.Element.setTextMeasurementCanvas(quickMeasuring(document.createElement('canvas')))
  vex.Metrics.get = quickLookup(vex.Metrics.get.bind(vex.Metrics)) as typeof vex.Metrics.get
  return vex
}
