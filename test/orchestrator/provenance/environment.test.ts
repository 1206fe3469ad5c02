import { hostname, userInfo } from 'node:os';
import { describe, expect, it } from 'vitest';
import { environmentRecord } from '../../../orchestrator/provenance/environment.js';
import { packageRoot } from '../../../orchestrator/provenance/package-root.js';

describe('the environment record', () => {
  const record = environmentRecord();

  it('says what a run was made with', () => {
    expect(record.trigpoint).toMatch(/^\d+\.\d+\.\d+/);
    expect(record.commit).toMatch(/^([0-9a-f]{40}(\+changes)?)?$/);
    expect(record.lockFile).toMatch(/^(sha256:[0-9a-f]{64})?$/);
    expect(record.node).toBe(process.versions.node);
    expect(record.cores).toBeGreaterThan(0);
  });

  it('tells nothing of the machine’s owner: no path, no host, no user, no variable', () => {
    const text = JSON.stringify(record);
    for (const secret of [packageRoot(), hostname(), process.env.PATH ?? '?', process.env.HOME ?? '?']) {
      expect(text).not.toContain(secret);
    }
    expect(Object.values(record)).not.toContain(userInfo().username);
  });
});
