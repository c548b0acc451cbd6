// Has a child, as the real one has ffmpeg.
import { spawn } from 'node:child_process'

spawn('sleep', ['600'], { stdio: 'ignore' })
process.on('disconnect', () => process.kill(0, 'SIGKILL'))
