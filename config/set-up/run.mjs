import { spawn } from 'node:child_process';
import { SetUpError } from './steps.mjs';

/**
 * Runs a program to its end and returns what it wrote. With `show` its output goes to the terminal instead.
 * The program does not outlive this process.
 * @throws SetUpError with the last lines of its output when it fails
 */
export function run(command, args, { cwd, env, show = false, input } = {}) {
  return new Promise((resolve, reject) => {
    const child = spawn(command, args, {
      cwd,
      env: env ?? process.env,
      stdio: [input === undefined ? 'ignore' : 'pipe', show ? 'inherit' : 'pipe', show ? 'inherit' : 'pipe'],
    });
    const end = () => child.kill();
    process.once('exit', end);
    child.once('close', () => process.off('exit', end));
    let output = '';
    const keep = (chunk) => (output = (output + chunk).slice(-200_000));
    child.stdout?.on('data', keep);
    child.stderr?.on('data', keep);
    if (input !== undefined) child.stdin.end(input);
    child.once('error', (error) =>
      reject(
        error.code === 'ENOENT'
          ? new SetUpError(`The program ${command} is not installed or not on the PATH.`)
          : error,
      ),
    );
    child.once('close', (code, signal) => {
      if (code === 0) return resolve(output);
      const tail = output.trim().split('\n').slice(-25).join('\n');
      reject(
        Object.assign(new SetUpError(`${command} ${args.join(' ')} ended with ${signal ?? code}.\n${tail}`), {
          output,
          code,
        }),
      );
    });
  });
}
