import { execFileSync } from 'node:child_process';
import { appendFileSync, cpSync, mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import { describe, expect, it, onTestFinished } from 'vitest';
import { codeFingerprint } from '../../../orchestrator/provenance/code.js';
import { fingerprintsOf } from '../../../orchestrator/provenance/fingerprints.js';
import { packageRoot } from '../../../orchestrator/provenance/package-root.js';
import type { Plan } from '../../../orchestrator/scan/plan.js';
import { taskOf } from '../../../orchestrator/scan/task.js';
import type { Fingerprints } from '../../../orchestrator/store/records.js';

const plan: Plan = {
  format: 1,
  title: 'A plan',
  model: { name: 'sm', options: {} },
  seed: '1',
  strata: [
    {
      name: 'all',
      method: 'uniform',
      generation: 0,
      points: 10,
      vary: [{ input: 'Mt', kind: 'range', from: 170, to: 175, scale: 'linear' }],
    },
  ],
  fix: {},
  define: [],
  running: { loops: 3, tolerance: 1e-9 },
  require: [{ name: 'perturbativity', options: {} }],
  note: [{ name: 'measured-top-mass', options: {} }],
  keep: [],
  remarks: [],
};

/** The built package once more, in a folder of its own. */
function copyOfPackage(): string {
  const root = mkdtempSync(join(tmpdir(), 'trigpoint-code-'));
  onTestFinished(() => rmSync(root, { recursive: true }));
  for (const part of ['package.json', 'dist/workers', 'dist/orchestrator']) {
    cpSync(join(packageRoot(), part), join(root, part), { recursive: true });
  }
  return root;
}

/** The fingerprints that a copy of the package gives to the plan. */
function fingerprintsIn(root: string): Fingerprints {
  const url = (file: string) => JSON.stringify(pathToFileURL(join(root, 'dist/orchestrator', file)).href);
  const program = `
    const { fingerprintsOf } = await import(${url('provenance/fingerprints.js')});
    const { taskOf } = await import(${url('scan/task.js')});
    const plan = ${JSON.stringify(plan)};
    process.stdout.write(JSON.stringify(fingerprintsOf(plan, taskOf(plan))));`;
  const text = execFileSync(process.execPath, ['--input-type=module', '-e', program], { encoding: 'utf8' });
  return JSON.parse(text) as Fingerprints;
}

function fingerprintsAfterEditing(file: string): Fingerprints {
  const root = copyOfPackage();
  appendFileSync(join(root, 'dist', file), '\nexport const added = 1;\n');
  return fingerprintsIn(root);
}

function changedNames(before: Fingerprints, after: Fingerprints): string[] {
  const flat = ({ modules, constraints, ...rest }: Fingerprints) => ({ ...rest, ...modules, ...constraints });
  const [a, b] = [flat(before) as Record<string, string>, flat(after) as Record<string, string>];
  return Object.keys(a).filter((name) => a[name] !== b[name]);
}

describe('fingerprints of a plan', () => {
  it('are the same from sources and from any copy of the built package', () => {
    expect(fingerprintsIn(copyOfPackage())).toEqual(fingerprintsOf(plan, taskOf(plan)));
  });

  it('change for everything that imports an edited file of numerics, however far away', () => {
    const before = fingerprintsOf(plan, taskOf(plan));
    const changed = changedNames(before, fingerprintsAfterEditing('workers/numerics/dop853-step.js'));
    expect(changed).toContain('running');
    expect(changed).not.toContain('sampling');
    expect(changed).not.toContain('measured-top-mass');
    expect(changed).not.toContain('plan');
  });

  it('do not change with a room that has no part in results, or a constraint that the plan does not use', () => {
    const before = fingerprintsOf(plan, taskOf(plan));
    for (const file of ['orchestrator/store/digest.js', 'workers/constraints/measured-alpha-s.js']) {
      expect([file, changedNames(before, fingerprintsAfterEditing(file))]).toEqual([file, []]);
    }
  });

  it('change for a constraint alone when its own file changes', () => {
    const before = fingerprintsOf(plan, taskOf(plan));
    const after = fingerprintsAfterEditing('workers/constraints/measured-top-mass.js');
    expect(changedNames(before, after)).toEqual(['measured-top-mass']);
  });

  it('cover the judging and evaluating code around the modules', () => {
    const before = fingerprintsOf(plan, taskOf(plan));
    expect(changedNames(before, fingerprintsAfterEditing('workers/evaluate.js'))).toEqual(['evaluation']);
  });

  it('name a model or constraint that does not exist', () => {
    const other = { ...plan, model: { name: 'sn', options: {} } };
    expect(() => fingerprintsOf(other, taskOf(other))).toThrow(/no model called sn/);
  });
});

describe('the fingerprint of code', () => {
  it('asks for a build where there is none', () => {
    const missing = pathToFileURL(join(packageRoot(), 'workers', 'nothing.ts')).href;
    expect(() => codeFingerprint(missing)).toThrow(expect.objectContaining({ code: 'not-built', exit: 3 }));
  });
});
