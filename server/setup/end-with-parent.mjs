// Loaded into every program we keep running: it ends when we are gone, even killed. Once the program listens itself,
// ending in order is its own affair; until then, or in a tool that knows nothing of us, this is it.
process.on('disconnect', () => {
  if (process.listenerCount('disconnect') === 1) process.exit(1)
})
