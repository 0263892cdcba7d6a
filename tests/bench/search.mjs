// Measures search and whole answers on an invented edition; ends with 1 where a promise is broken. Run with tsx.
import { reportAnswers } from './answers.bench.ts'
import { reportSearch } from './search.bench.ts'

// both are run whatever the first says
const kept = [reportSearch(), reportAnswers()]
process.exit(kept.every(Boolean) ? 0 : 1)
