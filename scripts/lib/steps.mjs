/** One line a step, with its time; what fails says what to do and ends the command. */
export async function step(what, work) {
  const begun = performance.now();
  try {
    const result = await work();
    const note = typeof result === 'string' ? ` (${result})` : '';
    console.log(`${seconds(begun)}  ${what}${note}`);
    return result;
  } catch (error) {
    console.error(`${seconds(begun)}  ${what}: failed`);
    throw error;
  }
}

export function seconds(begun) {
  return `${((performance.now() - begun) / 1000).toFixed(1).padStart(6)} s`;
}
