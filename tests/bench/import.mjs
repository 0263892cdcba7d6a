// Measures the import of a large table into the server at BENCH_BASE (process BENCH_PID, key BENCH_KEY of a curator); ends with 1 where a promise is broken. Run with tsx.
import { reportImport } from './import.bench.ts'

const { BENCH_BASE: base, BENCH_PID: pid, BENCH_KEY: key } = process.env
process.exit((await reportImport({ base, pid: Number(pid), key })) ? 0 : 1)
