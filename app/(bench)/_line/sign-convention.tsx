/** What the signs and the sums mean, wherever σ+ and σ− are shown. */
export function SignConvention({ thetaDeg, kind, sums }: { thetaDeg: number | null; kind: string; sums: 'each' | 'isotope' }) {
  const m = sums === 'isotope' ? 'F' : ''
  return (
    <p className="note mt-4 max-w-[60rem]">
      q = m<sub>{m === '' ? 'upper' : 'F, upper'}</sub> − m<sub>{m === '' ? 'lower' : 'F, lower'}</sub> is the same in absorption and emission: q = 0 is π, q = +1 σ+, q = −1 σ−. A positive shift is to higher wavenumber, to the blue.{' '}
      {sums === 'each' ? 'The strengths of each q sum to 1 at zero field.' : 'Over one isotope all strengths sum to 1, every sublevel being equally populated.'}{' '}
      {thetaDeg === null
        ? 'Without an angle heights are strengths; intensities in the table are averaged over angle.'
        : `Heights are intensities seen at ${thetaDeg}° to the field, and the whole line sums to 1 at every angle.`}
      {kind === 'E2' ? ' The angular intensity of quadrupole lines is not computed.' : ' Stokes V > 0 is counter-clockwise as the observer sees it, Q > 0 along the field projected on the sky, in emission.'}
    </p>
  )
}
