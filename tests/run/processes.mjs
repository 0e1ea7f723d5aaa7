import { spawn } from 'node:child_process'
import { root } from '../../server/source-digest.mjs'

const running = new Set()

/**
 * Runs a command to its end and tells its exit code. With `isQuiet` its output is kept and returned, otherwise it
 * goes where ours goes.
 */
export function runCommand(command, args, { env = {}, isQuiet = false } = {}) {
  return new Promise((done) => {
    const child = spawn(command, args, {
      cwd: root,
      env: { ...process.env, ...env },
      stdio: ['ignore', isQuiet ? 'pipe' : 'inherit', isQuiet ? 'pipe' : 'inherit'],
    })
    running.add(child)
    const output = []
    child.stdout?.on('data', (chunk) => output.push(chunk))
    child.stderr?.on('data', (chunk) => output.push(chunk))
    const end = (code) => {
      running.delete(child)
      done({ code, output: Buffer.concat(output).toString() })
    }
    child.on('error', (error) => {
      output.push(Buffer.from(`${error.message}\n`))
      end(127)
    })
    child.on('close', (code) => end(code ?? 1))
  })
}

/** A tool of node_modules, by the path of its script. */
export function runTool(script, args, options) {
  return runCommand(process.execPath, [`node_modules/${script}`, ...args], options)
}

export function stopRunning() {
  for (const child of running) child.kill('SIGTERM')
}
