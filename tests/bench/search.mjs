// Measures search on an invented edition; ends with 1 where a promise is broken. Run with tsx.
import { reportSearch } from './search.bench.ts'

process.exit(reportSearch() ? 0 : 1)
