/** Discrete Fourier transform in place, radix 2 (Cooley and Tukey, Mathematics of Computation 19, 1965).
 * @param re real parts; their number is a power of two
 * @param im imaginary parts, as many */
export function transform(re: Float64Array, im: Float64Array): void {
  const size = re.length
  for (let i = 1, j = 0; i < size; i++) {
    let bit = size >> 1
    for (; j & bit; bit >>= 1) j ^= bit
    j ^= bit
    if (i < j) {
      [re[i], re[j]] = [re[j]!, re[i]!];
      [im[i], im[j]] = [im[j]!, im[i]!]
    }
  }
  for (let span = 2; span <= size; span *= 2) butterflies(re, im, span)
}

function butterflies(re: Float64Array, im: Float64Array, span: number): void {
  const half = span / 2
  for (let k = 0; k < half; k++) {
    const cos = Math.cos(2 * Math.PI * k / span)
    const sin = -Math.sin(2 * Math.PI * k / span)
    for (let a = k, b = k + half; b < re.length; a += span, b += span) {
      const x = re[b]! * cos - im[b]! * sin
      const y = re[b]! * sin + im[b]! * cos
      re[b] = re[a]! - x
      im[b] = im[a]! - y
      re[a] = re[a]! + x
      im[a] = im[a]! + y
    }
  }
}
