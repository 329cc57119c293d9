/** Reads the library's tables (CSV text, SI) into columns. */
import type { CoolantColumns, SaturationColumns } from './fit.ts'

function columns(text: string): (name: string) => number[] {
  const lines = text.trim().split('\n')
  const names = lines[0].split(',')
  const rows = lines.slice(1).map((line) => line.split(',').map(Number))
  return (name) => {
    const at = names.indexOf(name)
    if (at < 0) throw new Error(`a table has no column ${name}`)
    return rows.map((row) => row[at])
  }
}

/** Columns of a `saturation-*.csv`. */
export function saturationColumns(text: string): SaturationColumns {
  const column = columns(text)
  return {
    T: column('T_K'),
    p: column('p_Pa'),
    rhoL: column('rho_l_kg_m3'),
    rhoV: column('rho_v_kg_m3'),
    hFg: column('h_fg_J_kg'),
    cpL: column('cp_l_J_kgK'),
    cpV: column('cp_v_J_kgK'),
    muL: column('mu_l_Pa_s'),
    muV: column('mu_v_Pa_s'),
    kL: column('k_l_W_mK'),
    kV: column('k_v_W_mK'),
    sigma: column('sigma_N_m'),
  }
}

/** Columns of a `coolant-*.csv`. */
export function coolantColumns(text: string): CoolantColumns {
  const column = columns(text)
  return {
    T: column('T_K'),
    rho: column('rho_kg_m3'),
    cp: column('cp_J_kgK'),
    mu: column('mu_Pa_s'),
    k: column('k_W_mK'),
  }
}
