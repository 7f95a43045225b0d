import { AxeBuilder } from '@axe-core/playwright';
import { type Browser, type BrowserContext, expect, type Page, type Response, test } from '@playwright/test';

/** A desk, a tablet or a window at 200 %, a phone. */
const sizes = [
  { width: 1440, height: 900 },
  { width: 1024, height: 768 },
  { width: 390, height: 844 },
] as const;

type Place = { path: string; heading: RegExp };
const visitorPlaces: Place[] = [
  { path: '/sign-in', heading: /^Sign in$/ },
  { path: '/forgotten-password', heading: /^Forgotten password$/ },
];
const registerPlaces: Place[] = [
  { path: '/waters', heading: /^Waters$/ },
  { path: '/waters/river-ollemar', heading: /Ollemar/ },
  { path: '/waters/branvell-bay', heading: /Branvell Bay/ },
  { path: '/receptors', heading: /^Receptors$/ },
  { path: '/receptors/int-1', heading: /Dunnaveth intake/ },
  { path: '/sources', heading: /^Sources$/ },
  { path: '/sources/v2-bridge', heading: /V2 bridge/ },
  { path: '/substances', heading: /^Substances$/ },
  { path: '/substances/ammonia-solution', heading: /Ammonia solution/ },
  { path: '/stations', heading: /^Stations$/ },
  { path: '/stations/ga', heading: /Gauge Dunnaveth/ },
];
const officePlaces: Place[] = [
  { path: '/office/people', heading: /^People$/ },
  { path: '/office/outbox', heading: /^Outbox$/ },
  { path: '/office/audit', heading: /^Audit trail$/ },
];

/** Listens to everything a page asks for and complains of. */
function listen(page: Page, baseURL: string): { foreign: string[]; complaints: string[]; policies: Set<string> } {
  const heard = { foreign: [] as string[], complaints: [] as string[], policies: new Set<string>() };
  page.on('request', (request) => {
    if (!request.url().startsWith(baseURL) && !/^(data|blob):/.test(request.url())) heard.foreign.push(request.url());
  });
  page.on('response', (response: Response) => {
    if (response.request().isNavigationRequest()) heard.policies.add(response.headers()['content-security-policy'] ?? 'none');
  });
  page.on('console', (message) => {
    if (message.type() === 'error') heard.complaints.push(`${page.url()}: ${message.text()}`);
  });
  page.on('pageerror', (error) => heard.complaints.push(`${page.url()}: ${error.message}`));
  return heard;
}

async function open(page: Page, { path, heading }: Place): Promise<void> {
  await page.goto(path);
  await expect(page.getByRole('heading', { level: 1, name: heading })).toBeVisible();
  await expect(page.getByText(/^Reading /)).toHaveCount(0);
}

/** Pixels by which a page is wider than its window, at each size. */
async function overflows(page: Page): Promise<string[]> {
  const found: string[] = [];
  for (const size of sizes) {
    await page.setViewportSize(size);
    const wider = await page.evaluate(() => document.documentElement.scrollWidth - window.innerWidth);
    if (wider > 0) found.push(`${page.url()} at ${size.width} px is ${wider} px too wide`);
  }
  return found;
}

/** Serious breaches of WCAG 2.2 AA; on a page already looked at by day, what its colours and its narrow form can change. */
async function violations(page: Page, again: boolean): Promise<string[]> {
  // Plates of receptors may touch on a small map; the list beside it opens the same ones.
  const rules = new AxeBuilder({ page }).exclude('.leaflet-marker-pane');
  const { violations: found } = await (again ? rules.withRules(['color-contrast', 'target-size', 'scrollable-region-focusable']) : rules.withTags(['wcag2a', 'wcag2aa', 'wcag21aa', 'wcag22aa'])).analyze();
  return found.filter(({ impact }) => impact === 'serious' || impact === 'critical').map(({ id, nodes }) => `${page.url()} ${id}: ${nodes.map(({ html }) => html).join(' ')}`);
}

async function signIn(page: Page, role: RegExp): Promise<void> {
  await page.goto('/sign-in');
  await page.getByRole('button', { name: role }).click();
  await expect(page).not.toHaveURL(/sign-in/);
}

/** Incident, chart of a draft and chart of a stored revision, as the demonstration holds them. */
async function incidentPlaces(context: BrowserContext): Promise<Place[]> {
  const incidents = (await (await context.request.get('/api/incidents')).json()) as { id: string; name: string }[];
  const { id } = incidents.find(({ name }) => name === 'Tanker at V2 bridge')!;
  const scenarios = (await (await context.request.get(`/api/incidents/${id}/scenarios`)).json()) as { id: string; name: string }[];
  const chart = `/scenarios/${scenarios[0]!.id}`;
  return [
    { path: '/', heading: /20\d\d$/ },
    { path: '/incidents', heading: /^Incidents$/ },
    { path: `/incidents/${id}`, heading: /Tanker at V2 bridge/ },
    { path: chart, heading: /As reported/ },
    { path: `${chart}?revision=1`, heading: /As reported/ },
    { path: '/account', heading: /Ilse Marrow/ },
    { path: '/no/such/page', heading: /There is nothing here/ },
  ];
}

/** Goes through places in one context; every one at three sizes, by day and by night. */
async function lookAt(browser: Browser, baseURL: string, role: RegExp | null, placesOf: (context: BrowserContext) => Place[] | Promise<Place[]>): Promise<void> {
  const context = await browser.newContext({ baseURL, colorScheme: 'light', viewport: sizes[0] });
  const page = await context.newPage();
  const heard = listen(page, baseURL);
  const wrong: string[] = [];
  if (role) await signIn(page, role);
  for (const [k, place] of (await placesOf(context)).entries()) {
    const [first, second] = k % 2 === 0 ? (['light', 'dark'] as const) : (['dark', 'light'] as const);
    await page.emulateMedia({ colorScheme: first });
    await page.setViewportSize(sizes[0]);
    await open(page, place);
    wrong.push(...(await violations(page, false)), ...(await overflows(page)));
    // The other theme without asking for the page again, as narrow as it was left.
    await page.emulateMedia({ colorScheme: second });
    wrong.push(...(await violations(page, true)));
  }
  expect(wrong).toEqual([]);
  expect(heard.foreign).toEqual([]);
  expect(heard.complaints).toEqual([]);
  expect(heard.policies.size).toBe(1);
  const [policy] = heard.policies;
  for (const directive of ["default-src 'self'", "script-src 'self'", "connect-src 'self'", "object-src 'none'"]) expect(policy).toContain(directive);
  expect(policy).not.toMatch(/https?:|\*/);
  await context.close();
}

test.describe('pages fit three sizes, ask no other host, complain of nothing and pass the accessibility rules by day and by night', () => {
  // Some forty looks of the accessibility checker, on a machine that may be doing other things.
  test.setTimeout(240_000);

  test('before signing in', ({ browser, baseURL }) => lookAt(browser, baseURL!, null, () => visitorPlaces));
  test('of incidents and forecasts', ({ browser, baseURL }) => lookAt(browser, baseURL!, /Ilse Marrow/, incidentPlaces));
  test('of the registers', ({ browser, baseURL }) => lookAt(browser, baseURL!, /^Engineer /, () => registerPlaces));
  test('of the office', ({ browser, baseURL }) => lookAt(browser, baseURL!, /^Administrator /, () => officePlaces));
});

test('a page enlarged to 200 % and a low window keep the map and scroll to everything else', async ({ page }) => {
  await signIn(page, /Ilse Marrow/);
  const [, , , chart] = await incidentPlaces(page.context());
  await page.setViewportSize({ width: 720, height: 450 });
  await open(page, chart!);
  await page.getByRole('button', { name: 'Concentration and time' }).click();
  const map = (await page.getByRole('application', { name: /map/i }).boundingBox())!;
  expect(map.height).toBeGreaterThan(140);
  await page.getByRole('img', { name: /^Concentration at INT-1/ }).scrollIntoViewIfNeeded();
  await expect(page.getByRole('img', { name: /^Concentration at INT-1/ })).toBeInViewport();
});

test('every control that is reached by Tab shows that it has the focus', async ({ page }) => {
  await signIn(page, /Ilse Marrow/);
  const [watch, , incident, chart] = await incidentPlaces(page.context());
  for (const place of [watch!, incident!, chart!]) {
    await open(page, place);
    const unseen = new Set<string>();
    for (let k = 0; k < 40; k++) {
      await page.keyboard.press('Tab');
      const name = await page.evaluate(() => {
        const held = document.activeElement;
        if (!held || held === document.body) return null;
        const style = getComputedStyle(held);
        return style.outlineStyle !== 'none' && Number.parseFloat(style.outlineWidth) >= 2 ? null : held.outerHTML.slice(0, 120);
      });
      if (name) unseen.add(name);
    }
    expect([...unseen]).toEqual([]);
  }
});
