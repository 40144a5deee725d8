import { spawn } from 'node:child_process';
import { createServer } from 'node:net';

/** A TCP port on loopback that is free now; the wanted one if it can be had. */
export async function freePort(wanted = 0) {
  for (let port = wanted; ; port++) {
    const got = await listen(port);
    if (got !== null) return got;
    if (wanted !== 0 && port >= wanted + 100) throw new Error(`No free port from ${wanted} on.`);
  }
}

function listen(port) {
  return new Promise((resolve) => {
    const server = createServer();
    server.once('error', () => resolve(null));
    // Next listens on every address, so a port taken on any of them is no use.
    server.listen(port, () => {
      const found = server.address().port;
      server.close(() => resolve(found));
    });
  });
}

/** Commands under way, each the leader of a group of its own. */
const underWay = new Set();

/** Ends the commands under way and what they have started. */
export function endRuns() {
  for (const child of underWay) {
    try {
      process.kill(-child.pid, 'SIGTERM');
    } catch {
      // It has just ended by itself.
    }
  }
}

/** Runs a command to its end; rejects with the last lines it wrote when it fails. */
export function run(command, args, options = {}) {
  return new Promise((resolve, reject) => {
    const child = spawn(command, args, {
      ...options,
      detached: true,
      stdio: ['ignore', 'pipe', 'pipe'],
    });
    underWay.add(child);
    let output = '';
    const keep = (chunk) => {
      output = (output + chunk).slice(-200_000);
    };
    child.stdout.on('data', keep);
    child.stderr.on('data', keep);
    child.once('error', (error) => {
      underWay.delete(child);
      reject(error);
    });
    child.once('close', (code) => {
      underWay.delete(child);
      if (code === 0) resolve(output);
      else reject(new Error(`${command} ended with ${code}:\n${lastLines(output)}`));
    });
  });
}

export function lastLines(text, count = 15) {
  return text.trimEnd().split('\n').slice(-count).join('\n');
}

/** Asks a process to end and waits; kills it when it takes too long. */
export async function stop(child, patience = 10_000) {
  if (!child || child.exitCode !== null || child.signalCode !== null) return;
  const gone = new Promise((resolve) => child.once('exit', resolve));
  child.kill('SIGTERM');
  const timer = setTimeout(() => child.kill('SIGKILL'), patience);
  await gone;
  clearTimeout(timer);
}

/** Whether a command can be found. */
export async function has(command) {
  try {
    await run('/bin/sh', ['-c', `command -v ${command}`], { env: withSystemPath() });
    return true;
  } catch {
    return false;
  }
}

/** Debian keeps servers in /usr/sbin, which an ordinary user's PATH leaves out. */
export function withSystemPath(extra = {}) {
  return { ...process.env, ...extra, PATH: `${process.env.PATH}:/usr/sbin:/usr/bin:/sbin:/bin` };
}
