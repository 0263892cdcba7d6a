import type { Isotope, Species } from '@/openapi/schemas/species'
import type { ProfiledLine } from '@/openapi/schemas/profiles'

export interface Mass {
  u: number | null
  basis: ProfiledLine['mass_basis']
}

const meanMass = (isotopes: readonly Isotope[]): number | null => {
  const known = isotopes.filter((isotope): isotope is Isotope & { mass_u: number; abundance_percent: number } => isotope.mass_u !== null && isotope.abundance_percent !== null)
  const share = known.reduce((sum, isotope) => sum + isotope.abundance_percent, 0)
  return share > 0 ? known.reduce((sum, isotope) => sum + isotope.mass_u * isotope.abundance_percent, 0) / share : null
}

/** Mass of an atom: that of the line, of the request, of the isotope asked, or the mean of the isotopes listed, by abundance. */
export function massOf(species: Species | null, asked: { line: number | null; all: number | null; isotope: number | null }): Mass {
  const given = asked.line ?? asked.all
  if (given !== null) return { u: given, basis: 'given' }
  if (species === null) return { u: null, basis: null }
  if (asked.isotope !== null) {
    const u = species.isotopes.find((isotope) => isotope.mass_number === asked.isotope)?.mass_u ?? null
    return { u, basis: u === null ? null : 'isotope' }
  }
  const u = meanMass(species.isotopes)
  return { u, basis: u === null ? null : 'mean_of_isotopes' }
}
