/** A fault whose message tells the person what to do; printed without a stack. */
export class SetUpError extends Error {
  name = 'SetUpError';
}

const onTerminal = process.stdout.isTTY === true;
let clock = null;

/** Runs one step of the set-up and prints its name, then how long it took. `detail` may return a few words to add. */
export async function step(title, run) {
  const startedAt = performance.now();
  process.stdout.write(onTerminal ? `  … ${title}` : `  … ${title}\n`);
  if (onTerminal) {
    clock = setInterval(
      () => process.stdout.write(`\r  … ${title} (${((performance.now() - startedAt) / 1000).toFixed(0)} s)`),
      1000,
    );
  }
  try {
    const detail = await run();
    const seconds = ((performance.now() - startedAt) / 1000).toFixed(1);
    const words = typeof detail === 'string' ? `: ${detail}` : '';
    process.stdout.write(`${onTerminal ? '\r\x1b[K' : ''}  ✓ ${title}${words} (${seconds} s)\n`);
  } catch (error) {
    process.stdout.write(`${onTerminal ? '\r\x1b[K' : ''}  ✗ ${title}\n`);
    throw error;
  } finally {
    clearInterval(clock);
  }
}

/** Prints a fault for a person: a sentence for what we foresaw, the whole stack for what we did not. */
export function printFault(error) {
  console.error(error instanceof SetUpError ? `\n${error.message}\n` : error);
}
