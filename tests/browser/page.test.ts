import { readdir, readFile } from 'node:fs/promises';
import { createRequire } from 'node:module';
import { gzipSync } from 'node:zlib';
import type { AxeResults } from 'axe-core';
import type { Page } from 'playwright-core';
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { aRecordCsv, aStationFile } from '../support/aStation.ts';
import { aTariffFile } from '../support/tariffs.ts';
import { chromiumPath, drop, type Stage, stage, type Watched } from './support.ts';

const browserPath = chromiumPath();

const file = (name: string, value: unknown) => ({ name, content: JSON.stringify(value) });
const STATION = file('station.json', aStationFile());
const RECORD = { name: 'flow.csv', content: aRecordCsv() };
const TARIFF = file('tariff.json', aTariffFile());

/** The four answers, with plain spaces where a number must not part from its unit. */
const answers = async (page: Page) =>
  (await page.locator('nav.rail .answer').allTextContents()).map((text) => text.replaceAll('\u00a0', ' '));
const openQuestion = (page: Page, title: string) => page.locator('nav.rail a', { hasText: title }).click();
const done = (page: Page) => page.locator('main[aria-busy=false] h2').first().waitFor();

/** The table of rules by its row heads: figures as they are on the screen. */
async function rulesTable(page: Page): Promise<Record<string, string[]>> {
  const rows = await page.locator('figure table').first().locator('tbody tr').all();
  const cells = await Promise.all(rows.map(async (row) => row.locator('th, td').allTextContents()));
  return Object.fromEntries(cells.map(([name = '', ...rest]) => [name.replace(/least$/, ''), rest]));
}

describe.skipIf(browserPath === null)('the page', () => {
  let app: Stage;
  let seen: Watched;
  let page: Page;

  beforeAll(async () => {
    app = await stage(browserPath!);
  });
  afterAll(() => app.close());

  beforeEach(async () => {
    const list = (await (await fetch(`${app.origin}/api/stations`)).json()) as { id: number }[];
    for (const { id } of list) await fetch(`${app.origin}/api/stations/${id}`, { method: 'DELETE' });
    seen = await app.open();
    page = seen.page;
    await page.getByText('Give your station').waitFor();
  });
  afterEach(async () => {
    expect(seen.elsewhere).toEqual([]);
    // A refused file is told by the browser too; that is no error of the page.
    expect(seen.errors.filter((error) => !/status of 422/.test(error))).toEqual([]);
    expect(app.bugs).toEqual([]);
    await page.close();
  });

  const withStation = async () => {
    await drop(page, [RECORD, TARIFF, STATION]);
    await done(page);
  };

  it('tells an empty database what it wants, takes three files in any order, and answers', async () => {
    await withStation();
    expect(await page.locator('h1').textContent()).toBe('Mill Lane');
    const [which, cost, change, basis] = await answers(page);
    expect(which).toMatch(/^Second pump from .* L\/s \(at 12 m static head\)$/);
    expect(cost).toMatch(/€.* a year at fixed speed \(scaled to a year\); /);
    expect(change).toMatch(/^Drives would (save|lose) €.* a year against fixed speed/);
    expect(basis).toBe('47 of 48 hours, 2 pumps, test tariff. 1 hour has no value, left out');
    expect(seen.errors).toEqual([]);
  });

  it('shows the figures of the API, three of them, and all on hover', async () => {
    await withStation();
    await openQuestion(page, 'What does it cost?');
    const [{ id }] = (await (await fetch(`${app.origin}/api/comparisons`)).json()) as [{ id: number }];
    const comparison = (await (await fetch(`${app.origin}/api/comparisons/${id}`)).json()) as {
      rules: { rule: string; energyKwh: number; totalCost: number }[];
    };
    const fixed = comparison.rules.find((rule) => rule.rule === 'fixed-speed')!;
    const figure = page.locator('figure table tbody tr', { hasText: 'Fixed speed' }).locator('td .figure').first();
    expect(await figure.textContent()).toBe(fixed.energyKwh.toLocaleString('en-IE', { maximumSignificantDigits: 3 }));
    const full = Number((await figure.getAttribute('title'))!.replaceAll(',', ''));
    expect(Math.abs(full / fixed.energyKwh - 1)).toBeLessThan(1e-11);
    expect(Object.keys(await rulesTable(page))).toHaveLength(comparison.rules.length);
  });

  it('moves crossings, table and bill when the static head is touched, until it is kept or dropped', async () => {
    await withStation();
    const before = await answers(page);
    await openQuestion(page, 'What does it cost?');
    const tableBefore = await rulesTable(page);
    await openQuestion(page, 'Which pump, when?');
    const head = page.getByLabel('Static head');
    const compared = page.waitForResponse((response) => response.url().includes('/power-over-flow'));
    await head.fill('4');
    await compared;
    await page.getByText('at 4 m static head').first().waitFor();
    const after = await answers(page);
    expect(after.slice(0, 3).filter((answer, i) => answer === before[i])).toEqual([]);
    expect(await page.locator('.draft').textContent()).toContain('static head 12 to 4 m');
    await openQuestion(page, 'What does it cost?');
    const tableAfter = await rulesTable(page);
    for (const [rule, row] of Object.entries(tableAfter)) {
      const [energyBefore, , totalBefore] = tableBefore[rule]!.map((text) => Number(text.replace(/[^\d.]/g, '')));
      const [energy, , total] = row.map((text) => Number(text.replace(/[^\d.]/g, '')));
      expect(energy, rule).toBeLessThan(energyBefore!);
      expect(total, rule).toBeLessThan(totalBefore!);
    }

    await page.getByRole('button', { name: 'Drop' }).click();
    await expect.poll(() => answers(page)).toEqual(before);

    await openQuestion(page, 'Which pump, when?');
    await head.fill('4');
    await page.getByRole('button', { name: 'Keep' }).click();
    await expect.poll(() => page.getByRole('button', { name: 'Keep' }).count()).toBe(0);
    await page.reload();
    await done(page);
    expect(await answers(page)).toEqual(after);
    expect(await head.inputValue()).toBe('4');
  });

  it('shows how the others manage with a pump taken out', async () => {
    await withStation();
    await page.getByLabel('P-2').check();
    await page.getByText('One pump, up to').first().waitFor();
    expect(await page.locator('.draft').textContent()).toContain('P-2 taken out');
    expect((await answers(page))[1]).toMatch(/ m³ of the flow is not met$/); // 90 L/s is more than one pump gives
    expect(await page.getByLabel('P-1').isDisabled()).toBe(true);
    expect(await page.getByRole('button', { name: 'Keep' }).count()).toBe(0);
  });

  it('tells every fault of bad files in one line each, stores nothing, and takes the mended file', async () => {
    const bad = { ...aStationFile(), units: { flow: 'cups', head: 'm', power: 'kW' }, surplus: 'hope' };
    await drop(page, [file('station.json', bad), TARIFF, RECORD]);
    const faults = page.locator('.in-hand .faults li');
    await faults.first().waitFor();
    const lines = await faults.allTextContents();
    expect(lines).toHaveLength(2);
    for (const line of lines) expect(line).toMatch(/^station\.json \S+: found .*; wanted /);
    expect(await (await fetch(`${app.origin}/api/stations`)).json()).toEqual([]);

    await drop(page, [STATION]);
    await done(page);
    expect(await page.locator('h1').textContent()).toBe('Mill Lane');
    expect(await faults.count()).toBe(0);
  });

  it('takes back the station when its record has a fault', async () => {
    await drop(page, [
      STATION,
      { name: 'flow.csv', content: 'time,flow\n2025-01-01T00:00:00Z,12\n2025-01-01T01:00:00Z,-3\n' },
    ]);
    const line = page.locator('.in-hand .faults li');
    await line.waitFor();
    expect(await line.textContent()).toMatch(/^flow\.csv line 3.*-3.*; wanted /);
    expect(await (await fetch(`${app.origin}/api/stations`)).json()).toEqual([]);
  });

  it('shows the record over time by any rule, a part of it on a press, its neighbours on the arrow keys', async () => {
    await withStation();
    await openQuestion(page, 'What is this based on?');
    const tools = page.locator('.tools');
    await tools.getByRole('button', { name: 'Day' }).click();
    await tools.getByText('7 Jan 2025 to 7 Jan 2025').waitFor();
    await tools.getByRole('button', { name: 'Day' }).press('ArrowLeft');
    await tools.getByText('6 Jan 2025 to 6 Jan 2025').waitFor();
    await tools.getByLabel('Rule').selectOption({ label: 'Fixed speed' });
    await page.getByRole('heading', { name: /^Fixed speed runs/ }).waitFor();
    await page.locator('figure', { hasText: 'Fixed speed runs' }).getByRole('button', { name: 'Numbers' }).click();
    expect(await page.locator('figure tbody tr').count()).toBe(24);
  });

  it.each([
    { width: 390, dark: false },
    { width: 820, dark: true },
    { width: 1440, dark: false },
    { width: 1440, dark: true },
  ])('has no fault that axe knows and no sideways scroll at $width px, dark: $dark', async ({ width, dark }) => {
    await withStation();
    const { page: other, errors } = await app.open({ width, dark });
    await done(other);
    const axe = await readFile(createRequire(import.meta.url).resolve('axe-core/axe.min.js'), 'utf8');
    await other.evaluate(axe);
    for (const title of [
      'Which pump, when?',
      'What does it cost?',
      'Is a change worth it?',
      'What is this based on?',
    ]) {
      await openQuestion(other, title);
      await other.getByRole('heading', { level: 2, name: title }).waitFor();
      for (const button of await other.getByRole('button', { name: 'Numbers' }).all()) await button.click();
      const { violations } = await other.evaluate(() =>
        (globalThis as unknown as { axe: { run(): Promise<AxeResults> } }).axe.run(),
      );
      expect(violations.map(({ id, nodes }) => `${title} ${id}: ${nodes[0]?.html}`)).toEqual([]);
      const [content, window] = await other.evaluate(() => [document.documentElement.scrollWidth, innerWidth]);
      expect(content, title).toBeLessThanOrEqual(window!);
    }
    expect(errors).toEqual([]);
    await other.close();
  });

  it('has scripts of less than 170 kB, packed', async () => {
    const folder = `${app.clientFolder}/assets`;
    const scripts = (await readdir(folder)).filter((name) => name.endsWith('.js'));
    const sizes = await Promise.all(scripts.map(async (name) => gzipSync(await readFile(`${folder}/${name}`)).length));
    expect(scripts.length).toBeGreaterThan(0);
    expect(sizes.reduce((sum, size) => sum + size)).toBeLessThan(170_000);
  });

  it('prints the four answers at the top and every question, on two sides of paper at most', async () => {
    await withStation();
    const pdf = await page.pdf({ format: 'Letter' });
    const pages = pdf.toString('latin1').match(/\/Type\s*\/Page[^s]/g) ?? [];
    expect([1, 2]).toContain(pages.length);
    const onPaper = await page.evaluate(() => {
      dispatchEvent(new Event('beforeprint'));
      // Read at once: the browser lays out the paper as soon as the event returns.
      const printed = {
        questions: document.querySelectorAll('h2').length,
        answersFirst: document.querySelector('.rail, h2')?.className === 'rail',
        paper: getComputedStyle(document.documentElement).getPropertyValue('--paper').trim(),
        pictures: document.querySelectorAll('canvas').length,
      };
      dispatchEvent(new Event('afterprint'));
      return printed;
    });
    expect(onPaper).toEqual({
      questions: 4,
      answersFirst: true,
      paper: expect.stringMatching(/^#fff(fff)?$/),
      pictures: 3,
    });
    // The page is itself again afterwards.
    await expect.poll(() => page.getByRole('heading', { level: 2 }).count()).toBe(1);
  });
});
