import { writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { openForWriting } from '../../orchestrator/store/open.js';
import { document, newFolder, trigpoint } from '../cli/trigpoint.js';
import { ask, dashboardOn, SCAN, type Answer, type Dashboard } from './served.js';

let folder: string;
let store: string;
let dashboard: Dashboard;
let launched: Record<string, unknown>;
const get = (path: string, options?: Parameters<typeof ask>[2]) => ask(dashboard.address, path, options);

beforeAll(async () => {
  folder = newFolder();
  store = join(folder, 'trigpoint.sqlite');
  writeFileSync(join(folder, 'plane.yaml'), SCAN);
  launched = await document(['launch', 'plane.yaml'], { cwd: folder });
  dashboard = await dashboardOn(store);
});
afterAll(() => dashboard.close());

/** Visible text, with white space in one piece. */
const textOf = ({ text }: Answer) => text.replace(/<[^>]+>/g, ' ').replace(/[\s\u202f\u00a0]+/g, ' ');

describe('the list of runs', () => {
  it('tells a newcomer with an empty store what to do', async () => {
    const empty = join(newFolder(), 'empty.sqlite');
    openForWriting(empty).close();
    const other = await dashboardOn(empty);
    const { status, text } = await ask(other.address, '/');
    await other.close();
    expect(status).toBe(200);
    expect(text).toContain('npx trigpoint launch scans/electroweak-vacuum.yaml');
  });

  it('is found under /runs too', async () => {
    expect((await get('/runs')).status).toBe(302);
  });

  it('shows the run with its digest and share, and its title as text', async () => {
    const page = await get('/');
    expect(page.text).toContain('A plane &lt;b&gt;for&lt;/b&gt; tests &amp; &#39;others&#39;');
    expect(page.text).toContain(`title="${launched.digest as string}"`);
    expect(textOf(page)).toContain('complete');
    expect(textOf(page)).toContain(`${launched.surviving as number} points`);
  });
});

describe('a run page', () => {
  it('agrees with what the command line says', async () => {
    const text = textOf(await get('/runs/1?where='));
    expect(text).toContain('1 000 of 1 000 points');
    expect(text).toContain(
      `${launched.surviving as number} surviving, ${launched.excluded as number} excluded`,
    );
    expect(text).toContain(launched.digest);
    expect(text).toContain('npx trigpoint rerun 1');
  });

  it('opens on the largest part of its plan, and says so in the address', async () => {
    const bare = await get('/runs/1');
    expect([bare.status, bare.headers.location]).toEqual([302, '/runs/1?only=stratum+%3D%3D+0']);
    expect(textOf(await get('/runs/1?only=stratum+%3D%3D+0'))).toContain('900 of 1 000 points');
  });

  it.each([
    ['where=surviving', 'surviving'],
    ['only=vacuumClass+%3D%3D+2', 'vacuumClass == 2'],
    ['quantity=Mt&from=170&to=175', '170 <= Mt <= 175'],
    ['where=Mt+%3C+182&only=excluded', '(excluded) and (Mt < 182)'],
    ['quantity=margin(vacuum-stability)&from=&to=0', 'margin(vacuum-stability) <= 0'],
  ])('%s: counts, CSV and command line agree', async (query, where) => {
    const page = await get(`/runs/1?${query}`);
    const [, counted] = /<strong>([^<]+)<\/strong>/.exec(page.text)!;
    const csv = await get(`/runs/1/points.csv?where=${encodeURIComponent(where)}`);
    const exported = await trigpoint(['export', '1', '--where', where], { cwd: folder });
    expect(page.text).toContain(
      `/runs/1/points.csv?where=${encodeURIComponent(where).replaceAll('%20', '+').replaceAll('(', '%28').replaceAll(')', '%29')}`,
    );
    expect(csv.text.trim().split('\r\n')).toHaveLength(Number(counted.replace(/\D/g, '')) + 1);
    expect(csv.text).toBe(exported.out);
    expect(Number(counted.replace(/\D/g, ''))).toBeGreaterThan(0);
  });

  it('pages through all points once', async () => {
    const seen = new Set<string>();
    for (let page = 1; page <= 40; page++) {
      const { text } = await get(`/runs/1?page=${page}`);
      for (const [, point] of text.matchAll(/id="point-(\d+-\d+)"/g)) seen.add(point);
    }
    expect(seen.size).toBe(1000);
  });

  it('says beside the field what is wrong with a filter, where, and what else was meant', async () => {
    const page = await get('/runs/1?where=Mt+%3C+Mhh');
    expect(page.status).toBe(400);
    expect(textOf(page)).toMatch(/Expected the name of a column, found Mhh/);
    expect(page.text).toContain('<mark>Mhh</mark>');
    expect(page.text).toContain('aria-describedby="mistake-where"');
    expect(textOf(page)).toContain('is not applied');
    expect(textOf(page)).toContain('1 000 of 1 000 points');
  });

  it('keeps what was typed, and applies no part of a filter that is mistaken in another', async () => {
    const page = await get('/runs/1?only=surviving&quantity=Mt&from=17o&to=&xFrom=3&xTo=');
    expect(page.status).toBe(400);
    expect(page.text).toContain('value="17o"');
    expect(page.text).toContain('value="3"');
    expect(textOf(page)).toContain('1 000 of 1 000 points');
    expect(textOf(page)).toContain('is not applied');
    expect((await get('/runs/1/points.csv?only=surviving&quantity=Mt&from=17o&to=')).status).toBe(400);
  });

  it('never answers half a filter: two halves that only make sense together are a mistake', async () => {
    const page = await get(`/runs/1?only=surviving&where=${encodeURIComponent('Mt < 170) or (Mt > 0')}`);
    expect(page.status).toBe(400);
  });

  it('has a figure that says in itself what it shows', async () => {
    const { status, headers, text } = await get(
      '/runs/1/figure.svg?where=Mt+%3C+175&x=Mh&y=Mt&colour=vacuumClass',
    );
    expect(status).toBe(200);
    expect(headers['content-type']).toMatch(/^image\/svg\+xml/);
    expect(text).toContain(launched.digest);
    expect(text).toContain('Points where Mt &lt; 175');
    expect(text).toContain('(</tspan><tspan>GeV');
    expect(text.replace(/base64,[^"]+/g, '')).not.toMatch(/NaN|Infinity|undefined/);
  });

  it('has the cautions of what its figure shows beside it, each once', async () => {
    const page = textOf(await get('/runs/1?x=Mt&y=instabilityScale&colour=barrierField'));
    expect(page.match(/Caution: the scale depends on the gauge of the effective potential/g)).toHaveLength(1);
    expect(page).toContain('100.0 % of the run');
  });

  it('draws any two columns against each other, and any third as colour', async () => {
    const columns = (await dashboard.questions.columns(1)).map((column) => column.name);
    expect(columns.length).toBeGreaterThan(30);
    for (const [i, y] of columns.entries()) {
      const colour = columns[(i * 7 + 3) % columns.length];
      const query = new URLSearchParams({ x: 'Mt', y, colour, drawing: i % 2 ? 'points' : 'cells' });
      const { status, text } = await get(`/runs/1/figure.svg?${query.toString()}`);
      const { points } = await dashboard.questions.counts({ run: 1, where: `${y} == ${y}` });
      expect([query.toString(), status]).toEqual([query.toString(), points > 0 ? 200 : 404]);
      expect(text.replace(/base64,[^"]+/g, '')).not.toMatch(/NaN|Infinity|undefined/);
    }
  });

  it('gives its scan file and provenance as files', async () => {
    expect((await get('/runs/1/scan-file')).text).toBe(SCAN);
    const provenance = await get('/runs/1/provenance.json');
    expect(JSON.stringify(JSON.parse(provenance.text))).toContain(launched.digest);
    const description = await get('/runs/1/points.csv-metadata.json?where=surviving');
    expect(JSON.stringify(JSON.parse(description.text))).toContain('Mt');
  });
});

describe('a point page', () => {
  it('gives the command that makes the very same point', async () => {
    const page = await get('/runs/1/points/0/7');
    expect(textOf(page)).toContain('every stored number came out the same to the last bit');
    const [, command] = /<code>(npx trigpoint point [^<]+)<\/code>/.exec(page.text)!;
    const words = command.replaceAll('&#39;', '').split(' ').slice(2);
    const facts = JSON.parse((await trigpoint([...words, '--json'], { cwd: folder })).out) as {
      fingerprint: string;
    };
    expect(page.text).toContain(facts.fingerprint);
  });

  it('says in words why a point is excluded', async () => {
    const [row] = (await dashboard.questions.page({ run: 1, where: 'violated(vacuum-stability)' }, [], 0, 1))
      .rows;
    const text = textOf(await get(`/runs/1/points/${row.stratum}/${row.index}`));
    expect(text).toMatch(/Excluded by \d of 2 deciding constraints/);
    expect(text).toContain('Stability of the electroweak vacuum');
    expect(text).toContain('What it asks, where it holds, what it neglects');
  });

  it.each([
    ['/runs/1/points/0/900', 'points 0 to 899; 900 was asked'],
    ['/runs/1/points/2/0', 'has no stratum 2'],
    ['/runs/1/points/0/x', 'found “x”'],
    ['/runs/7', 'There is no run 7'],
    ['/runs/seven', 'found “seven”'],
    ['/nowhere', 'There is no such page'],
  ])('%s is not there, and the page says so', async (path, words) => {
    const page = await get(path);
    expect(page.status).toBe(404);
    expect(textOf(page)).toContain(words);
  });
});

describe('what is refused', () => {
  it.each([
    ['a foreign Host', { headers: { Host: 'evil.example:80' } }, 403],
    ['a Host that only begins like ours', { headers: { Host: 'localhost.evil.example' } }, 403],
    ['a foreign Origin', { headers: { Origin: 'https://evil.example' } }, 403],
    ['the Origin of a sandboxed page', { headers: { Origin: 'null' } }, 403],
    ['a POST', { method: 'POST' }, 405],
    ['a DELETE', { method: 'DELETE' }, 405],
  ])('%s', async (_name, options, status) => {
    const page = await get('/runs/1?where=', options);
    expect(page.status).toBe(status);
    expect(page.text).not.toContain('Provenance');
    if (status === 405) expect(page.headers.allow).toBe('GET, HEAD');
  });

  it.each(['localhost', '127.0.0.1:4671', '[::1]:4671', 'LOCALHOST:80'])('but not Host %s', async (host) => {
    expect((await get('/', { headers: { Host: host } })).status).toBe(200);
  });

  it('an oversized address, politely', async () => {
    const page = await get(`/runs/1?where=${'a'.repeat(9000)}`);
    expect(page.status).toBe(414);
    expect(textOf(page)).toContain('At most 8000 characters');
  });

  it.each([
    '/runs/%E0%A4%A',
    '/runs/1?where=%E0%A4%A',
    '/runs/1?where[x]=1&page[]=2',
    '/runs/1?__proto__=1&where=1&where=2',
  ])('or survives an odd address: %s', async (path) => {
    const page = await get(path);
    expect(page.status).toBeLessThan(500);
    expect(page.text).not.toMatch(/node_modules|at .*\.[jt]s:\d+/);
  });

  it('markup in any part of the address', async () => {
    const evil = encodeURIComponent('"><script>alert(1)</script>');
    for (const path of [
      `/${evil}`,
      `/runs/${evil}`,
      ...['where', 'x', 'only', 'from', 'xFrom', 'column', 'page'].map(
        (name) => `/runs/1?${name}=${evil}&quantity=Mt`,
      ),
    ]) {
      expect((await get(path)).text).not.toContain('<script>alert');
    }
  });
});

describe('every page', () => {
  it('carries a strict policy, and none that would break plain http on this machine', async () => {
    for (const path of ['/', '/runs/1?where=', '/runs/1/points/0/0', '/nowhere', '/runs/1/figure.svg']) {
      const { headers } = await get(path);
      const policy = String(headers['content-security-policy']);
      expect(policy).toContain("default-src 'none'");
      expect(policy).toContain("script-src 'self'");
      expect(policy).not.toMatch(/unsafe|upgrade-insecure-requests/);
      expect(headers['strict-transport-security']).toBeUndefined();
      expect(headers['x-powered-by']).toBeUndefined();
      expect(headers['x-content-type-options']).toBe('nosniff');
    }
  });

  it('has nothing inline that the policy forbids, and loads nothing from elsewhere', async () => {
    for (const path of ['/', '/runs/1?where=', '/runs/1/points/0/0']) {
      const { text } = await get(path);
      expect(text).not.toMatch(/<style|\sstyle=|\son[a-z]+=|<script(?! src="\/assets\/)/);
      expect(text).not.toMatch(/(src|href)="(https?:)?\/\/(?!arxiv\.org|doi\.org)/);
    }
  });

  it('says in words that the store cannot be read, with nothing of the program’s insides', async () => {
    const other = await dashboardOn(store);
    await other.questions.close();
    const page = await ask(other.address, '/runs/1?where=');
    await other.close();
    expect(page.status).toBe(500);
    expect(textOf(page)).toContain('Nothing was changed');
    expect(page.text).not.toMatch(/node_modules|at .*\.[jt]s:\d+/);
    expect(other.errors).toHaveLength(1);
  });
});
