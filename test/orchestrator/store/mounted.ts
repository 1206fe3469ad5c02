import { execFileSync } from 'node:child_process';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { onTestFinished } from 'vitest';

/** Why small file systems cannot be mounted here, or undefined where they can. Needs root on Linux. */
export const noMounts = reason();

/** A small file system in memory, which a test may fill or make read-only. Unmounted when the test is over. */
export function smallDisk(size: string): { path: string; makeReadOnly(): void } {
  const path = mkdtempSync(join(tmpdir(), 'trigpoint-disk-'));
  execFileSync('mount', ['-t', 'tmpfs', '-o', `size=${size}`, 'tmpfs', path]);
  onTestFinished(() => {
    execFileSync('umount', ['-l', path]);
    rmSync(path, { recursive: true });
  });
  return { path, makeReadOnly: () => void execFileSync('mount', ['-o', 'remount,ro', path]) };
}

function reason(): string | undefined {
  const path = mkdtempSync(join(tmpdir(), 'trigpoint-disk-'));
  try {
    execFileSync('mount', ['-t', 'tmpfs', '-o', 'size=64k', 'tmpfs', path], { stdio: 'pipe' });
    execFileSync('umount', [path]);
    return undefined;
  } catch (error) {
    if (process.env.TRIGPOINT_REQUIRE_ALL === '1') throw error;
    return `file systems cannot be mounted here: ${(error as Error).message}`;
  } finally {
    rmSync(path, { recursive: true, force: true });
  }
}
