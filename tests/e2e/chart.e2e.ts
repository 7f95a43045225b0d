import { AxeBuilder } from '@axe-core/playwright';
import { expect, type Page, test } from '@playwright/test';

type Position = { lon: number; lat: number };
/** What the map shows before anything is placed: the district, south-west and north-east. */
const DISTRICT = [{ lon: -117.6, lat: -44.72 }, { lon: -116.6, lat: -44.28 }] as const;
const MAP_PADDING_PX = 24;

async function signIn(page: Page): Promise<void> {
  await page.goto('/sign-in');
  await page.getByRole('button', { name: /Ilse Marrow/ }).click();
  await expect(page).not.toHaveURL(/sign-in/);
}

/** A new incident with an empty chart; answers when the map is there. */
async function startForecast(page: Page): Promise<void> {
  await page.getByRole('button', { name: 'Start a forecast' }).first().click();
  await page.getByRole('button', { name: 'Start forecast' }).click();
  await expect(page.getByRole('application', { name: /map/i })).toBeVisible();
  await expect(page.getByText('Click the water where it got in')).toBeVisible();
}

/** Web Mercator in units of the world's width. */
const mercator = ({ lon, lat }: Position): [number, number] => {
  const sine = Math.sin((lat * Math.PI) / 180);
  return [(lon + 180) / 360, 0.5 - Math.log((1 + sine) / (1 - sine)) / (4 * Math.PI)];
};

/** Clicks the untouched map at a position, which it has fitted to the district in half steps of zoom. */
async function clickMapAt(page: Page, position: Position): Promise<void> {
  const box = (await page.getByRole('application', { name: /map/i }).boundingBox())!;
  const [west, south] = mercator(DISTRICT[0]);
  const [east, north] = mercator(DISTRICT[1]);
  const fit = Math.min((box.width - 2 * MAP_PADDING_PX) / (east - west), (box.height - 2 * MAP_PADDING_PX) / (south - north));
  const worldPx = 256 * 2 ** (Math.floor(2 * Math.log2(fit / 256)) / 2);
  const [x, y] = mercator(position);
  await page.mouse.click(box.x + box.width / 2 + (x - (west + east) / 2) * worldPx, box.y + box.height / 2 + (y - (south + north) / 2) * worldPx);
}

async function setStart(page: Page, day: string, time: string): Promise<void> {
  const start = page.getByRole('group', { name: /^Began at/ });
  await start.getByRole('textbox', { name: 'Day', exact: true }).fill(day);
  await start.getByRole('textbox', { name: /^Time of day/ }).fill(time);
}

const likely = (page: Page) => page.getByRole('textbox', { name: /^Likely/ });

/** The forecast on the page belongs to the figures on the page: nothing is being solved, all frames are there. */
async function solved(page: Page): Promise<void> {
  // One round of the wait before a change is sent; what follows waits for the answer.
  await page.waitForTimeout(300);
  await expect(page.getByText('Solving the change')).toHaveCount(0);
  await expect(page.getByRole('button', { name: 'All receptors' })).toBeVisible();
  await page.waitForLoadState('networkidle').catch(() => undefined);
}

type Row = { verdict: string; arrivalH: number | null; peak: number; peakH: number | null; endH: number | null };
const hours = (text: string): number | null => {
  const match = /T\+(\d+):(\d\d)/.exec(text);
  return match ? Number(match[1]) + Number(match[2]) / 60 : null;
};

/** A receptor's line of the table, peak in the unit given. */
async function rowOf(page: Page, code: string, unit: string): Promise<Row> {
  const cells = await page.getByRole('table', { name: 'Receptors by arrival' }).getByRole('row').filter({ hasText: code }).getByRole('cell').allInnerTexts();
  const [, verdict = '', earliest = '', , , peakText = '', peakAt = '', end = ''] = cells;
  const plain = peakText.replace(/[\u202f\s]+/g, ' ');
  const match = new RegExp(`(?:likely )?([\\d. ]+) ${unit}$`).exec(plain);
  if (!match) throw new Error(`The peak of ${code} is "${plain}", expected ${unit}`);
  return { verdict, arrivalH: hours(earliest), peak: Number(match[1]!.replaceAll(' ', '')), peakH: hours(peakAt), endH: hours(end) };
}

/** Check figures are hand reckoned: a factor of 2 in peak and 25 % in time. */
function within(value: number | null, [low, high]: [number, number], share: number): void {
  expect(value).toBeGreaterThanOrEqual(low * (1 - share));
  expect(value).toBeLessThanOrEqual(high * (1 + share));
}
const inTime = (value: number | null, range: [number, number]) => within(value, range, 0.25);
function inPeak(value: number, [low, high]: [number, number]): void {
  expect(value).toBeGreaterThanOrEqual(low / 2);
  expect(value).toBeLessThanOrEqual(high * 2);
}

test('from sign-in to a first forecast takes at most eight inputs and well under a minute', async ({ page, baseURL }) => {
  const foreign: string[] = [];
  page.on('request', (request) => {
    if (!request.url().startsWith(baseURL!) && !/^(data|blob):/.test(request.url())) foreign.push(request.url());
  });
  const began = Date.now();
  // Six inputs: sign in, two presses to an empty chart, a click on the river, the substance, the amount.
  await signIn(page);
  await startForecast(page);
  await clickMapAt(page, { lon: -116.7321, lat: -44.4305 });
  await page.getByRole('combobox', { name: 'Substance' }).selectOption({ label: 'Ammonia solution 25 %' });
  await likely(page).fill('4000');
  await expect(page.getByText('Forecast not saved')).toBeVisible();
  await expect(page.getByRole('button', { name: /INT-1.*show its curve/ })).toBeVisible();
  expect(Date.now() - began).toBeLessThan(60_000);
  expect(foreign).toEqual([]);
  const [first] = await page.evaluate(() => performance.getEntriesByName('forecast-first-contour').map((entry) => entry.duration));
  // A third of a second is the aim; on a shared machine a second still shows that nothing waits in line.
  expect(first).toBeLessThan(1_000);
});

test('the tanker on the bridge reaches three receptors within the check figures, is saved and found again', async ({ page }) => {
  await signIn(page);
  await startForecast(page);
  await clickMapAt(page, { lon: -116.7321, lat: -44.4305 });
  await page.getByRole('combobox', { name: 'Substance' }).selectOption({ label: 'Ammonia solution 25 %' });
  await likely(page).fill('4000');
  await setStart(page, '2031-05-12', '06:40');
  await page.getByRole('combobox', { name: 'It ran out' }).selectOption('steady');
  await page.getByRole('textbox', { name: /^Duration/ }).fill('10');
  await solved(page);
  await page.getByRole('button', { name: 'All receptors' }).click();
  const intake = await rowOf(page, 'INT-1', 'mg/l');
  expect(intake.verdict).toBe('may exceed');
  inTime(intake.arrivalH, [3.0, 3.8]);
  inTime(intake.peakH, [4.3, 4.3]);
  inPeak(intake.peak, [21, 26]);
  const headgate = await rowOf(page, 'IRR-1', 'mg/l');
  inTime(headgate.peakH, [8.5, 8.5]);
  inPeak(headgate.peak, [15, 15]);
  const town = await rowOf(page, 'INT-2', 'mg/l');
  inTime(town.arrivalH, [17.7, 18.1]);
  inTime(town.peakH, [20.4, 20.4]);
  inPeak(town.peak, [4.3, 4.5]);
  inTime(town.endH, [23, 23]);

  await page.getByRole('button', { name: 'Save scenario' }).click();
  // A server just seeded solves the scenarios of the demonstration first.
  await expect(page.getByText('Saved as revision 1')).toBeVisible({ timeout: 60_000 });
  const address = page.url();
  await page.goto(`${address}?revision=1`);
  await expect(page.getByText(/Revision 1, done, engine/)).toBeVisible();
  await page.getByRole('button', { name: 'All receptors' }).click();
  expect(await rowOf(page, 'INT-1', 'mg/l')).toMatchObject({ verdict: 'may exceed', peak: intake.peak });
  await page.getByRole('button', { name: 'Edit from here' }).click();
  await expect(page).toHaveURL(address);
});

test('slurry in the lake is counted in organisms and reaches the cove within the check figures', async ({ page }) => {
  await signIn(page);
  await startForecast(page);
  await page.getByRole('combobox', { name: 'Or at a registered source' }).selectOption({ label: 'SRC-6 Thessaby digester' });
  await page.getByRole('combobox', { name: 'Substance' }).selectOption({ label: 'Escherichia coli' });
  await page.getByRole('combobox', { name: 'Amount given as' }).selectOption('volume-count');
  await likely(page).fill('300');
  await page.getByRole('textbox', { name: /^Organisms per volume/ }).fill('3e7');
  await page.getByRole('combobox', { name: 'It ran out' }).selectOption('steady');
  await page.getByRole('textbox', { name: /^Duration/ }).fill('180');
  await setStart(page, '2031-07-06', '05:30');
  await page.getByRole('checkbox', { name: /^Reckon with losses/ }).check();
  await page.getByRole('textbox', { name: /^T90 by day/ }).fill('40');
  await page.getByRole('textbox', { name: /^T90 by night/ }).fill('40');
  await page.getByRole('button', { name: /^Water and flow/ }).click();
  // Along the axis of the lake from the jetty to the cove.
  await page.getByRole('textbox', { name: /^Toward/ }).fill('298');
  await page.getByRole('button', { name: /^Coefficients/ }).click();
  await page.getByRole('textbox', { name: /^Mixing depth/ }).fill('6');
  await solved(page);
  await page.getByRole('button', { name: 'All receptors' }).click();
  const cove = await rowOf(page, 'BCH-2', 'counts/100 ml');
  inTime(cove.peakH, [17, 17]);
  inPeak(cove.peak, [1_000, 1_000]);
});

test('a container at sea reaches the desalination intake within the check figures', async ({ page }) => {
  await signIn(page);
  await startForecast(page);
  await clickMapAt(page, { lon: -117.43, lat: -44.48 });
  await page.getByRole('combobox', { name: 'Substance' }).selectOption({ label: 'Phenol' });
  await likely(page).fill('20000');
  await page.getByRole('combobox', { name: 'It ran out' }).selectOption('steady');
  await page.getByRole('textbox', { name: /^Duration/ }).fill('720');
  await setStart(page, '2031-08-02', '03:00');
  await page.getByRole('button', { name: /^Water and flow/ }).click();
  const residual = page.getByRole('region', { name: 'Residual current' });
  await residual.getByRole('textbox', { name: /^Speed/ }).fill('0.1');
  await residual.getByRole('textbox', { name: /^Toward/ }).fill('30');
  await page.getByRole('combobox', { name: 'Add to the current' }).selectOption('wind');
  const wind = page.getByRole('region', { name: 'Wind drift' });
  await wind.getByRole('textbox', { name: /^Wind/ }).fill('8');
  await wind.getByRole('textbox', { name: /^From/ }).fill('225');
  await solved(page);
  await page.getByRole('button', { name: 'All receptors' }).click();
  const intake = await rowOf(page, 'INT-4', 'µg/l');
  inTime(intake.arrivalH, [8, 15]);
  inPeak(intake.peak, [780, 870]);
});

test('wrong figures are refused beside their field while the last forecast stays, struck', async ({ page }) => {
  await signIn(page);
  await startForecast(page);
  await clickMapAt(page, { lon: -116.7321, lat: -44.4305 });
  await page.getByRole('combobox', { name: 'Substance' }).selectOption({ label: 'Ammonia solution 25 %' });
  await likely(page).fill('4000');
  await expect(page.getByText('Forecast not saved')).toBeVisible();
  // Changes of one field within a second and a half are one step of undo.
  await page.waitForTimeout(1_600);
  await likely(page).fill('0');
  await expect(page.getByText('Must be above 0 kg', { exact: true })).toBeVisible();
  await expect(page.getByText('Forecast of the last complete figures.')).toBeVisible();
  await expect(page.getByRole('button', { name: 'Save scenario' })).toBeDisabled();
  await page.getByRole('heading', { level: 1 }).click();
  await page.keyboard.press('Control+z');
  await expect(likely(page)).toHaveValue('4000');
  await expect(page.getByText('Forecast of the last complete figures.')).toHaveCount(0);
});

test('two people writing at once lose nothing: the second is told and may keep a copy', async ({ page, browser, baseURL }) => {
  await signIn(page);
  await startForecast(page);
  const scenarioId = new URL(page.url()).pathname.split('/').pop()!;
  const theirs = await browser.newContext({ baseURL: baseURL! });
  const other = await theirs.newPage();
  await other.goto('/sign-in');
  await other.getByRole('button', { name: /Wen Castellane/ }).click();
  await expect(other).not.toHaveURL(/sign-in/);
  const before = (await (await other.request.get(`/api/scenarios/${scenarioId}`)).json()) as { draft: object; draftVersion: number };
  // Holds this page's write back until the other one has been made.
  await page.route('**/draft', async (route) => {
    const answer = await other.request.put(`/api/scenarios/${scenarioId}/draft`, { data: { draft: { ...before.draft, title: 'theirs' }, draftVersion: before.draftVersion } });
    expect(answer.status()).toBe(200);
    await route.continue();
  }, { times: 1 });
  await page.getByRole('combobox', { name: 'Substance' }).selectOption({ label: 'Phenol' });
  await expect(page.getByRole('heading', { name: 'Wen Castellane has changed this scenario' })).toBeVisible();
  await expect(page.getByText(/They differ in: the substance/)).toBeVisible();
  await page.getByRole('button', { name: 'Keep mine as a copy' }).click();
  await expect(page).not.toHaveURL(new RegExp(scenarioId));
  await expect(page.getByRole('combobox', { name: 'Substance' }).locator('option:checked')).toHaveText('Phenol');
  await theirs.close();
});

test('the whole Chart works by keyboard and passes the accessibility rules by day, by night and on a phone', async ({ page, browser, baseURL }) => {
  await signIn(page);
  await startForecast(page);
  await page.getByRole('textbox', { name: /^Or at coordinates/ }).fill("44°25.83' S 116°43.93' W");
  await page.keyboard.press('Enter');
  await expect(page.getByText(/OL km 48\.0, right bank/)).toBeVisible();
  await page.getByRole('combobox', { name: 'Substance' }).selectOption({ label: 'Ammonia solution 25 %' });
  await likely(page).fill('4000');
  const slider = page.getByRole('slider', { name: 'Time shown on the map' });
  await expect(page.getByRole('button', { name: 'All receptors' })).toBeVisible();
  await slider.focus();
  await page.keyboard.press('End');
  await expect(slider).toHaveAttribute('aria-valuenow', (await slider.getAttribute('aria-valuemax'))!);
  await page.keyboard.press('Home');
  const first = Number(await slider.getAttribute('aria-valuenow'));
  await page.keyboard.press('ArrowRight');
  expect(Number(await slider.getAttribute('aria-valuenow'))).toBeGreaterThan(first);
  await page.getByRole('button', { name: /INT-1.*show its curve/ }).press('Enter');
  await expect(page.getByRole('img', { name: /^Concentration at INT-1/ })).toBeVisible();
  await expectAccessible(page);
  const night = await browser.newContext({ baseURL: baseURL!, colorScheme: 'dark', viewport: { width: 390, height: 844 }, storageState: await page.context().storageState() });
  const phone = await night.newPage();
  await phone.goto(page.url());
  await expect(phone.getByRole('button', { name: 'All receptors' })).toBeVisible();
  await phone.getByRole('button', { name: 'Raise the page' }).click();
  // Plates may touch on a map this small; the page lists the same receptors.
  await expectAccessible(phone, '.leaflet-marker-pane');
  await night.close();
});

async function expectAccessible(page: Page, leftOut?: string): Promise<void> {
  const rules = new AxeBuilder({ page }).withTags(['wcag2a', 'wcag2aa', 'wcag21aa', 'wcag22aa']);
  const { violations } = await (leftOut ? rules.exclude(leftOut) : rules).analyze();
  expect(violations.map(({ id, nodes }) => `${id}: ${nodes.map(({ html }) => html).join(' ')}`)).toEqual([]);
}
