// Measures publishing and comparing editions of 100 000 levels; ends with 1 where a promise is broken. Run with tsx on a database of its own.
import { reportEditions } from './editions.bench.ts'

process.exit((await reportEditions()) ? 0 : 1)
