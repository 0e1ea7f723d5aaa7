import { lockFolder } from '../../db/folder-lock'

/** Run as a process of its own: takes the folder named on the command line and stays until its input ends. */
try {
  lockFolder(process.argv[2] ?? '')
  console.log('locked')
  process.stdin.resume()
} catch (error) {
  console.log((error as Error).message)
}
