// Loaded into tools that know nothing of us: they end when whoever started them is gone.
process.on('disconnect', () => process.exit(0))
