/**
 * For tools whose output is read by another program: one that has read enough (`| head`) closes the
 * pipe, and that is no error of ours.
 */
process.stdout.on('error', (error: NodeJS.ErrnoException) => {
  if (error.code !== 'EPIPE') throw error
  process.exit(0)
})
