/** A worker with bad habits, told by the name of the file: exhausts its memory, hangs, or answers. */
process.on('message', ({ fileName }) => {
  if (fileName === 'hang') {
    for (;;) Math.sqrt(2);
  }
  if (fileName === 'hungry') {
    const hoard = [];
    for (;;) hoard.push(new Array(10_000).fill(Math.PI));
  }
  process.send({ kind: 'measured', records: [] });
});
process.on('disconnect', () => process.exit(0));
