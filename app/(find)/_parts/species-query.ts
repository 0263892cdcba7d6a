/** The request for a species' levels; one shape for the server's prefetch and the browser. */
export const speciesLevels = (species: string, edition: number | undefined) => ({ species: [species], sort: 'energy', limit: 500, edition })
