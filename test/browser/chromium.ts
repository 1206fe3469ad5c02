import { spawnSync } from 'node:child_process';
import { mkdirSync, readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { fileURLToPath } from 'node:url';
import { chromium, type Browser, type Page } from 'playwright-core';
import { expect } from 'vitest';

/** A real Chromium, found on the PATH. */

const program = ['chromium', 'chromium-browser']
  .map((name) => spawnSync('sh', ['-c', `command -v ${name}`], { encoding: 'utf8' }).stdout.trim())
  .find((path) => path !== '');
export const noChromium = program === undefined;
if (noChromium && process.env.TRIGPOINT_REQUIRE_ALL === '1') throw new Error('chromium is not on the PATH');
if (noChromium) console.log('browser tests: skipped, chromium is not on the PATH');

export function openBrowser(): Promise<Browser> {
  const root = process.getuid?.() === 0;
  return chromium.launch({
    executablePath: program,
    args: [
      '--headless',
      ...(root ? ['--no-sandbox'] : []),
      '--disable-gpu',
      '--disable-quic',
      '--no-first-run',
      '--disable-background-networking',
      '--disable-component-update',
      '--disable-sync',
    ],
  });
}

/** Complaints of the browser itself: refused by the content policy, failed to load, thrown by a script. */
export function complaintsOf(page: Page): string[] {
  const complaints: string[] = [];
  page.on('console', (message) => {
    if (message.type() === 'error' || message.type() === 'warning') complaints.push(message.text());
  });
  page.on('pageerror', (error) => complaints.push(error.message));
  return complaints;
}

const axe = readFileSync(createRequire(import.meta.url).resolve('axe-core/axe.min.js'), 'utf8');

interface Violation {
  readonly id: string;
  readonly nodes: readonly { readonly html: string; readonly failureSummary?: string }[];
}

/** No violation of any rule of axe-core in its default set (WCAG 2 A and AA, best practices). */
export async function expectAccessible(page: Page): Promise<void> {
  // Evaluated by the debugger, which the content policy of the page does not bind.
  await page.evaluate(axe);
  const violations = await page.evaluate(async () => {
    const { axe } = window as unknown as { axe: { run(): Promise<{ violations: Violation[] }> } };
    return (await axe.run()).violations;
  });
  const said = violations.flatMap(({ id, nodes }) =>
    nodes.map((node) => `${id}: ${node.html.slice(0, 200)} ${node.failureSummary ?? ''}`),
  );
  expect(said).toEqual([]);
}

/** A picture in test/.out for people to look at. */
export async function picture(page: Page, name: string): Promise<void> {
  const folder = fileURLToPath(new URL('../.out/browser/', import.meta.url));
  mkdirSync(folder, { recursive: true });
  await page.screenshot({ path: `${folder}${name}.png`, fullPage: true });
}
