// The reference workload of tests/bench/reference/kernel.h in JavaScript: flat, coefficients as literals.
import { readFileSync } from 'node:fs'

const ROWS = 20
const RESULTS = 30

type Coefficients = { sat: number[][]; cool: number[][]; Tmin: number; Tmax: number }
type Kernel = (inputs: Float64Array, results: Float64Array, count: number) => void

/** Mode B refreshes the properties at every row; F holds the subcooling and iterates nothing. */
export function compileKernel(mode: 'B' | 'F'): Kernel {
  const file = new URL('./reference/coefs.json', import.meta.url)
  const {
    sat: SAT,
    cool: COOL,
    Tmin: TMIN,
    Tmax: TMAX,
  } = JSON.parse(readFileSync(file, 'utf8')) as Coefficients
  const names = ['rl', 'rv', 'hf', 'cp', 'mu', 'k']
  // All six series advance together: six independent chains keep the multipliers busy.
  const series = (x: string, into: string[]) => {
    const lines = [`x = ${x}`, 'x2 = 2 * x']
    for (const s of into.keys()) lines.push(`u${s} = ${SAT[s][13]}`, `w${s} = 0`)
    for (let term = 12; term >= 1; term--)
      for (const s of into.keys())
        lines.push(`t = x2 * u${s} - w${s} + ${SAT[s][term]}`, `w${s} = u${s}`, `u${s} = t`)
    for (const [s, name] of into.entries()) lines.push(`${name} = x * u${s} - w${s} + ${SAT[s][0]}`)
    return lines.join('; ')
  }
  const horner = (c: number[], z: string) =>
    c.reduceRight((sum, term) => (sum ? `${term} + ${z} * (${sum})` : `${term}`), '')
  const inside = (temperature: string) => `
    z = (${temperature} - 320) / 50
    rho = ${horner(COOL[0], 'z')}; cpc = ${horner(COOL[1], 'z')}; muc = ${horner(COOL[2], 'z')}; kc = ${horner(COOL[3], 'z')}
    Re = rho * v * Di / muc; Pr = cpc * muc / kc
    if (Re < 2300) { f = 64 / Re; Nu = 3.66 }
    else {
      s = 0.79 * Math.log(Re) - 1.64; f = 1 / (s * s)
      c3 = Math.cbrt(Pr); Nu = f / 8 * (Re - 1000) * Pr / (1 + 12.7 * Math.sqrt(f / 8) * (c3 * c3 - 1))
    }
    hi = Nu * kc / Di`
  const reduced = (temperature: string) => `(2 * (${temperature}) - ${TMIN + TMAX}) / ${TMAX - TMIN}`
  const wall = `
    lo = 0; up = dmax
    for (let it = 0; it < 50; it++) {
      hp = h + b * dT; g = hp / dT; ho = Cn * Math.sqrt(Math.sqrt(g))
      fv = ho * dT * R + dT - dmax
      if (fv > 0) up = dT; else lo = dT
      nd = dT - fv / (R * ho * (0.75 + 0.25 * b * dT / hp) + 1)
      its++
      if (Math.abs(nd - dT) <= 1e-9 * dT) { dT = nd; break }
      dT = nd > lo && nd < up ? nd : 0.5 * (lo + up)
    }
    hp = h + b * dT; g = hp / dT; ho = Cn * Math.sqrt(Math.sqrt(g))`
  const fixed = `dT = (0.30 + 0.005 * n) * app; hp = h + b * dT; g = hp / dT; ho = Cn * Math.sqrt(Math.sqrt(g))`
  const refresh = `
    ${series(reduced('Ts - 0.5 * dT'), names)}
    C = 0.729 * Math.sqrt(Math.sqrt(9.80665 * rl * (rl - rv) * k * k * k / (mu * D))); b = 0.68 * cp
    Tc = Tci + rise * (n + 0.5) / ${ROWS}
    Ref = Re; Prf = Pr; ff = f; rhof = rho; hif = hi
    ${inside('Tc')}
    R = D / (Di * hi) + Rw + 8.8e-5; dmax = Ts - Tc; sR += hf
    Re = Ref; Pr = Prf; f = ff; rho = rhof; hi = hif`
  const body = `
  const FN = new Float64Array(${ROWS}), m = new Float64Array(${ROWS})
  for (let i = 0; i < ${ROWS}; i++) FN[i] = Math.pow(i + 1, 5 / 6) - Math.pow(i, 5 / 6)
  return function (inputs, o, count) {
    let ${[...names, 'x', 'x2', 't', 'z', 'rho', 'cpc', 'muc', 'kc', 'Re', 'Pr', 's', 'f', 'c3', 'Nu', 'hi', 'g'].join(' = 0, ')} = 0
    let ${names.map((_, s) => `u${s} = 0, w${s} = 0`).join(', ')}
    let rls = 0, rvs = 0, h = 0, cps = 0, mus = 0, ks = 0
    let Ref = 0, Prf = 0, ff = 0, rhof = 0, hif = 0, lo = 0, up = 0, fv = 0, nd = 0, hp = 0, Tc = 0
    for (let i = 0; i < count; i++) {
      const at = 6 * i, to = ${RESULTS} * i
      const Ts = inputs[at], Tci = inputs[at + 1], v = inputs[at + 2], D = inputs[at + 3], w = inputs[at + 4], kw = inputs[at + 5]
      const Di = D - 2 * w
      ${series(reduced('Ts'), ['rls', 'rvs', 'h', 'cps', 'mus', 'ks'])}
      z = (Tci - 320) / 50
      const mc = (${horner(COOL[0], 'z')}) * v * Math.PI * 0.25 * Di * Di * ${ROWS} * 20 / 2
      const rise = 2e5 / (mc * (${horner(COOL[1], 'z')})), Tco = Tci + rise, Tm = Tci + 0.5 * rise
      const d1 = Ts - Tci, d2 = Ts - Tco, lmtd = d2 > 0.01 ? (d1 - d2) / Math.log(d1 / d2) : 0
      ${inside('Tm')}
      const Rw = D * Math.log(D / Di) / (2 * kw)
      let R = D / (Di * hi) + Rw + 8.8e-5
      const app = Ts - Tm
      let dT = 0.5 * app
      ${series(reduced('Ts - 0.15 * app'), names)}
      let C = 0.729 * Math.sqrt(Math.sqrt(9.80665 * rl * (rl - rv) * k * k * k / (mu * D))), b = 0.68 * cp
      let sq = 0, sd = 0, sho = 0, sm = 0, sR = 0, dT1 = 0, q1 = 0, ho1 = 0, ho = 0, q = 0, its = 0, dmax = app
      for (let n = 0; n < ${ROWS}; n++) {
        ${mode === 'B' ? refresh : ''}
        const Cn = C * FN[n]
        ${mode === 'F' ? fixed : wall}
        q = ho * dT; const mn = q * Math.PI * D / hp; m[n] = mn; sm += mn; sq += q; sd += dT; sho += ho
        if (n === 0) { dT1 = dT; q1 = q; ho1 = ho }
      }
      const U = sq / (${ROWS} * app), area = lmtd > 0 ? 2e5 / (U * lmtd) : 0, L = area / (Math.PI * D * ${ROWS} * 20)
      const dpc = 2 * (f * L / Di + 1.5) * rho * v * v * 0.5
      const gap = 0.25 * D
      let acc = 0, dpv = 0, vmax = 0
      for (let n = ${ROWS} - 1; n >= 0; n--) { acc += m[n]; const vv = acc / (rvs * gap); if (vv > vmax) vmax = vv; dpv += 0.25 * rvs * vv * vv }
      o[to] = U; o[to + 1] = area; o[to + 2] = L; o[to + 3] = dpc; o[to + 4] = dpv; o[to + 5] = hi; o[to + 6] = sho / ${ROWS}
      o[to + 7] = ho1; o[to + 8] = ho; o[to + 9] = dT1; o[to + 10] = dT; o[to + 11] = sd / ${ROWS}; o[to + 12] = q1; o[to + 13] = q
      o[to + 14] = sq / ${ROWS}; o[to + 15] = Re; o[to + 16] = Pr; o[to + 17] = f; o[to + 18] = Tco; o[to + 19] = lmtd; o[to + 20] = mc
      o[to + 21] = Rw; o[to + 22] = R; o[to + 23] = sm; o[to + 24] = 4 * sm / mu; o[to + 25] = vmax; o[to + 26] = hf + sR
      o[to + 27] = Ts - dT1; o[to + 28] = cps * mus / ks * rls / rl; o[to + 29] = its
    }
  }`
  // The source is ours alone; written out it would be six times as long and no clearer.
  return new Function(body)() as Kernel
}

/** Inputs of the reference's points. */
export function kernelInputs(count: number): Float64Array {
  const share = (x: number) => x - Math.floor(x)
  const inputs = new Float64Array(6 * count)
  for (let i = 0; i < count; i++) {
    const a = i + 1
    inputs[6 * i] = 320 + 60 * share(a * 0.8812714616335696)
    inputs[6 * i + 1] = inputs[6 * i] - (12 + 25 * share(a * 0.7766393890897682))
    inputs[6 * i + 2] = 0.8 + 2.2 * share(a * 0.6844301295853426)
    inputs[6 * i + 3] = 0.012 + 0.02 * share(a * 0.6031687406857282)
    inputs[6 * i + 4] = 0.0008 + 0.0012 * share(a * 0.5315553977157792)
    inputs[6 * i + 5] = 15 + 95 * share(a * 0.4684445)
  }
  return inputs
}

export const KERNEL_RESULTS = RESULTS
