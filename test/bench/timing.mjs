/** The shortest of several rounds in milliseconds: what the code costs when the machine is left alone. */
export function best(run, rounds = 15) {
  let shortest = Infinity;
  for (let i = 0; i < rounds; i++) {
    const start = performance.now();
    run();
    shortest = Math.min(shortest, performance.now() - start);
  }
  return shortest;
}

/** One line: a time and its ratio to a reference measured in the same run. */
export function report(what, milliseconds, reference, referenceName) {
  const ratio = (milliseconds / reference).toFixed(2);
  console.log(
    `${milliseconds.toFixed(2).padStart(10)} ms  ${ratio.padStart(7)} x ${referenceName}:  ${what}`,
  );
}
