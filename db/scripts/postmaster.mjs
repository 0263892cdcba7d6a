// What /proc tells about a PostgreSQL server: whether the pid file of a data folder names a living one, and which processes
// of a killed one live on.
import fs from 'node:fs'
import path from 'node:path'

/** 'running', 'zombie' or 'none'. */
function processState(pid) {
  try {
    const stat = fs.readFileSync(`/proc/${pid}/stat`, 'utf8')
    return /^[ZX]/.test(stat.slice(stat.lastIndexOf(')') + 2)) ? 'zombie' : 'running'
  } catch { return 'none' }
}

function isServerOf(pid, data) {
  try { if (fs.readlinkSync(`/proc/${pid}/cwd`) === fs.realpathSync(data)) return true } catch { /* not ours to see */ }
  try {
    const words = fs.readFileSync(`/proc/${pid}/cmdline`, 'utf8').split('\0')
    return /postgres$/.test(words[0] ?? '') && words.includes(data)
  } catch { return false }
}

/**
 * Undefined where there is no pid file; `{ pid, port }` of the living server; or `{ stale: true, pid, taken }`, where `taken`
 * says that the pid now belongs to something else (PostgreSQL itself would refuse to start for as long as that lives).
 */
export function runningServer(data) {
  let lines
  try { lines = fs.readFileSync(path.join(data, 'postmaster.pid'), 'utf8').split('\n') } catch { return undefined }
  const pid = Number(lines[0])
  const state = processState(pid)
  if (state === 'running' && isServerOf(pid, data)) return { pid, port: Number(lines[3]) }
  return { stale: true, pid, taken: state !== 'none' }
}

/** Signals the processes of a killed server: those of postgres whose working folder is the data folder. Returns how many. */
export function endOrphans(data, signal) {
  let count = 0
  for (const pid of fs.readdirSync('/proc').filter((name) => /^\d+$/.test(name))) {
    try {
      if (fs.readlinkSync(`/proc/${pid}/cwd`) !== fs.realpathSync(data) || path.basename(fs.readlinkSync(`/proc/${pid}/exe`)) !== 'postgres') continue
      process.kill(Number(pid), signal)
      count++
    } catch { /* gone, or another user's */ }
  }
  return count
}
