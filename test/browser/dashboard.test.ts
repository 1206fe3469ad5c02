import { readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import type { Browser, BrowserContextOptions, Page } from 'playwright-core';
import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest';
import { newFolder, planeScan, start, trigpoint } from '../cli/trigpoint.js';
import { dashboardOn, SCAN, type Dashboard } from '../dashboard/served.js';
import { complaintsOf, expectAccessible, noChromium, openBrowser, picture } from './chromium.js';

let browser: Browser;
let dashboard: Dashboard;
const pages: Page[] = [];

async function open(path: string, options: BrowserContextOptions = {}, on = dashboard): Promise<Page> {
  const context = await browser.newContext({ viewport: { width: 1280, height: 900 }, ...options });
  const page = await context.newPage();
  pages.push(page);
  await page.goto(`${on.address}${path}`);
  return page;
}

/** What the browser and the script for events say of a connection that was cut. */
const LOST_CONNECTION = /net::ERR_|^\[object Event\]$/;

const numberIn = (text: string | null) => Number((text ?? '').replace(/\D/g, ''));
const countShown = async (page: Page) => numberIn(await page.locator('.count strong').textContent());

describe.skipIf(noChromium)('the dashboard in Chromium', () => {
  beforeAll(async () => {
    const folder = newFolder();
    writeFileSync(join(folder, 'plane.yaml'), SCAN);
    expect((await trigpoint(['launch', 'plane.yaml'], { cwd: folder })).status).toBe(0);
    dashboard = await dashboardOn(join(folder, 'trigpoint.sqlite'));
    browser = await openBrowser();
  });
  afterEach(async () => {
    await Promise.all(pages.splice(0).map((page) => page.context().close()));
  });
  afterAll(async () => {
    await browser?.close();
    await dashboard?.close();
  });

  describe('reading a run', () => {
    it('goes from the list to the run, filters, chooses a figure, opens a point; the address holds it all', async () => {
      const page = await open('/');
      const complaints = complaintsOf(page);
      await page.getByRole('link', { name: /A plane/ }).click();
      expect(await countShown(page)).toBe(900);
      await page.getByLabel('Only points that are').selectOption({ label: 'excluded' });
      await page.getByRole('textbox', { name: 'and where' }).fill('Mt > 172');
      await page.getByLabel('Across', { exact: true }).selectOption('Mt');
      await page.getByLabel('Up', { exact: true }).selectOption('lambdaMin');
      await page.getByLabel('Colour', { exact: true }).selectOption('margin(vacuum-stability)');
      await page.getByRole('button', { name: 'Show' }).click();
      const filtered = await countShown(page);
      expect(filtered).toBeGreaterThan(0);
      expect(filtered).toBeLessThan(1000);
      expect(await page.locator('.filter code').textContent()).toBe('(excluded) and (Mt > 172)');
      expect(await page.getByRole('img', { name: /λ_min/ }).count()).toBe(1);
      await picture(page, 'filtered');
      const again = await open(new URL(page.url()).pathname + new URL(page.url()).search);
      expect(await countShown(again)).toBe(filtered);
      await page.locator('.points tbody a').first().click();
      await page.getByRole('heading', { level: 1, name: /Point/ }).waitFor();
      await page.getByText(/Excluded by \d of 2/).waitFor();
      await page.goBack();
      expect(await countShown(page)).toBe(filtered);
      expect(complaints).toEqual([]);
    });

    it('downloads as CSV exactly the points that are counted', async () => {
      const page = await open('/runs/1?only=surviving&quantity=Mh&from=120&to=');
      const counted = await countShown(page);
      const [download] = await Promise.all([
        page.waitForEvent('download'),
        page.getByRole('link', { name: /with all columns \(CSV\)/ }).click(),
      ]);
      expect(download.suggestedFilename()).toBe('run-1.csv');
      const lines = readFileSync(await download.path(), 'utf8')
        .trim()
        .split('\r\n');
      const names = lines[0].split(',');
      expect(lines.slice(1)).toHaveLength(counted);
      for (const line of lines.slice(1))
        expect(Number(line.split(',')[names.indexOf('Mh')])).toBeGreaterThanOrEqual(120);
    });

    it('shows a mistake in the filter beside its field, which is announced and keeps what was typed', async () => {
      const page = await open('/runs/1');
      await page.getByRole('textbox', { name: 'and where' }).fill('Mtt < 172');
      await page.keyboard.press('Enter');
      const field = page.getByRole('textbox', { name: 'and where' });
      expect(await field.inputValue()).toBe('Mtt < 172');
      expect(await field.getAttribute('aria-invalid')).toBe('true');
      const said = await page.locator('#mistake-where').textContent();
      expect(said?.replace(/\s+/g, ' ')).toContain(
        'Expected the name of a column, found Mtt (did you mean Mt?)',
      );
      await expectAccessible(page);
      await picture(page, 'mistake');
    });

    it('draws one figure for wide screens and another for telephones, never wider than the page', async () => {
      for (const width of [375, 768, 1280, 2560]) {
        for (const path of ['/', '/runs/1', '/runs/1/points/0/7']) {
          const page = await open(path, { viewport: { width, height: 900 } });
          const wide = await page.evaluate(() => document.documentElement.scrollWidth);
          expect([path, width, wide]).toEqual([path, width, width]);
        }
        const page = await open('/runs/1', { viewport: { width, height: 900 } });
        expect(await page.locator('.results svg.plot:visible').count()).toBe(1);
        await picture(page, `run-${width}`);
      }
    });
  });

  describe('for everybody', () => {
    const looks = [375, 1280].flatMap((width) =>
      (['light', 'dark'] as const).map((colorScheme) => ({ width, colorScheme })),
    );
    it.each(looks)('has no violation of axe at $width px, $colorScheme', async ({ width, colorScheme }) => {
      for (const path of [
        '/',
        '/runs/1',
        '/runs/1?where=excluded&drawing=points',
        '/runs/1/points/0/7',
        '/nowhere',
      ]) {
        const page = await open(path, { viewport: { width, height: 900 }, colorScheme });
        for (const details of await page.locator('details').all())
          await details.evaluate((one) => one.setAttribute('open', ''));
        await expectAccessible(page);
        await picture(page, `${path.replace(/\W+/g, '-')}-${width}-${colorScheme}`);
      }
    });

    it('is reached by keyboard: skip link first, then every control in order, with visible focus', async () => {
      const page = await open('/runs/1');
      await page.keyboard.press('Tab');
      expect(await page.evaluate(() => document.activeElement?.textContent)).toBe('Skip to the content');
      await page.keyboard.press('Enter');
      expect(await page.evaluate(() => document.activeElement?.id)).toBe('main');
      const reached: string[] = [];
      for (let i = 0; i < 40; i++) {
        await page.keyboard.press('Tab');
        const focus = await page.evaluate(() => {
          const at = document.activeElement as HTMLElement;
          const style = getComputedStyle(at);
          return {
            name: at.id || at.textContent.trim(),
            outline: style.outlineStyle,
            width: style.outlineWidth,
          };
        });
        expect([focus.name, focus.outline, focus.width]).toEqual([focus.name, 'solid', '3px']);
        reached.push(focus.name);
      }
      const controls = ['only-0', 'from-0', 'quantity-0', 'to-0', 'where', 'x', 'y', 'colour', 'Show'];
      expect(reached.filter((name) => controls.includes(name))).toEqual(controls);
    });

    it('works without scripting: filter, figure, pages, point', async () => {
      const page = await open('/runs/1', { javaScriptEnabled: false });
      await page.getByRole('textbox', { name: 'and where' }).fill('violated(vacuum-stability)');
      await page.getByRole('button', { name: 'Show' }).click();
      const counted = numberIn(await page.locator('.count strong').textContent());
      expect(counted).toBeGreaterThan(25);
      expect(await page.locator('.results svg.plot').count()).toBe(2);
      await page.getByRole('link', { name: 'Next' }).click();
      expect(await page.locator('.points tbody tr').count()).toBe(Math.min(25, counted - 25));
      await page.locator('.points tbody a').first().click();
      expect(await page.getByRole('heading', { level: 1 }).textContent()).toMatch(/Point \d · \d+/);
    });

    it('runs nothing that a title or an address brings along', async () => {
      const page = await open(`/runs/1?where=${encodeURIComponent('"><img src=x onerror=alert(1)>')}`);
      expect(await page.locator('img').count()).toBe(0);
      expect(await page.locator('h1 b').count()).toBe(0);
    });
  });

  describe('watching a run', () => {
    it('sees it progress to its end without a reload, through a lost connection, and finds the figure filled', async () => {
      const folder = newFolder();
      writeFileSync(join(folder, 'plane.yaml'), planeScan(60_000));
      const running = start(['launch', 'plane.yaml', '--workers', '1'], { cwd: folder });
      await running.saying(/points\/s/);
      const store = join(folder, 'trigpoint.sqlite');
      let live = await dashboardOn(store, 200);
      const page = await open('/runs/1', {}, live);
      const complaints = complaintsOf(page);
      await page.evaluate(() => Object.assign(window, { notReloaded: true }));
      const points = async () =>
        numberIn(
          await page
            .locator('#progress .gauge dd')
            .first()
            .evaluate((dd) => dd.firstChild!.textContent),
        );
      const first = await points();
      await expect.poll(points, { timeout: 20_000 }).toBeGreaterThan(first);
      await page.locator('#progress').getByText(/left/).waitFor();
      await picture(page, 'live');

      const port = Number(new URL(live.address).port);
      await live.close();
      live = await dashboardOn(store, 200, port);
      const before = await points();
      await expect.poll(points, { timeout: 20_000 }).toBeGreaterThan(before);

      await page.getByText('The run is complete.').waitFor({ timeout: 60_000 });
      expect(await points()).toBe(60_000);
      await expect.poll(() => countShown(page), { timeout: 10_000 }).toBe(60_000);
      const digest = /sha256:[0-9a-f]{64}/;
      await expect.poll(() => page.locator('#provenance').textContent(), { timeout: 10_000 }).toMatch(digest);
      await expect
        .poll(() => page.locator('#identity').textContent(), { timeout: 10_000 })
        .toMatch(/complete/);
      expect(await page.evaluate(() => 'notReloaded' in window)).toBe(true);
      expect(complaints.filter((text) => !LOST_CONNECTION.test(text))).toEqual([]);
      await running.ended;
      await page.context().close();
      await live.close();
    });
  });
});
