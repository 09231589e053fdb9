import type { Browser, Page, Request } from 'playwright-core';
import { PLAIN_SCENE } from '@/scripts/simulator/scene';
import { scanText, type ScanPlan } from '@/scripts/simulator/scan';
import { Desk, fixture, openBrowser, PASSWORD, SITE } from './support/browser';

/**
 * The main job from an empty installation, through all four roles in a real browser: set up, take, review, chart.
 * The frames are the simulated ones of fixtures/frames with a true wavelength of 635 nm; people are invented.
 */
jest.setTimeout(120_000);

const EMAIL = {
  admin: 'admin@story.example',
  technician: 'technician@story.example',
  reviewer: 'reviewer@story.example',
  both: 'both@story.example',
  qa: 'qa@story.example',
};
const TRUE_NM = 635;

/** An invented counter on a slide before the same bench: 1.27 mm from fringe to fringe. */
const SCAN: ScanPlan = {
  scene: { ...PLAIN_SCENE, wavelengthNm: TRUE_NM },
  fromMm: -8,
  toMm: 8,
  stepMm: 0.05,
  zeroMm: 0.4,
  detectorMm: 0.2,
  peakCounts: 30_000,
  dark: 300,
  seed: 20_261_203,
};

describe('the main job', () => {
  let browser: Browser;
  let admin: Desk;
  let technician: Desk;
  let reviewer: Desk;
  let both: Desk;
  let qa: Desk;

  beforeAll(async () => {
    browser = await openBrowser();
    [admin, technician, reviewer, both, qa] = await Promise.all(
      Array.from({ length: 5 }, () => Desk.open(browser)),
    );
  });
  afterAll(() => browser?.close());
  afterEach(() => [admin, technician, reviewer, both, qa].forEach((desk) => desk?.expectQuiet()));

  test('the first visit makes the first admin', async () => {
    const { page } = admin;
    await page.goto('/');
    await page.waitForURL('**/first-admin');
    await admin.expectAccessible();
    await page.getByLabel('Your name').fill('Admin A');
    await page.getByLabel('E-mail').fill(EMAIL.admin);
    await page.getByLabel('New password').fill(PASSWORD);
    await page.getByLabel('The same again').fill(PASSWORD);
    await page.getByRole('button', { name: 'Start' }).click();
    await page.waitForURL('**/benches');
    // The door is shut afterwards.
    const outsider = await Desk.open(browser);
    await outsider.page.goto('/first-admin');
    expect(new URL(outsider.page.url()).pathname).toBe('/sign-in');
    await outsider.close();
  });

  test('the admin enters people, a slit plate with its certificate, and a bench whose setup waits for QA', async () => {
    const { page } = admin;
    await page.goto('/people');
    const people: [string, string, string[]][] = [
      ['Technician T', EMAIL.technician, ['Technician']],
      ['Reviewer R', EMAIL.reviewer, ['Reviewer']],
      ['Both B', EMAIL.both, ['Technician', 'Reviewer']],
      ['QA Q', EMAIL.qa, ['QA']],
    ];
    for (const [name, email, roles] of people) {
      await page.getByRole('button', { name: 'Add a person…' }).click();
      await page.getByLabel('Name').fill(name);
      await page.getByLabel('E-mail').fill(email);
      await page.getByLabel('First password').fill(PASSWORD);
      for (const role of ['Technician', 'Reviewer', 'QA', 'Admin'])
        await page.getByRole('checkbox', { name: role, exact: true }).setChecked(roles.includes(role));
      await page.getByRole('button', { name: 'Add the person' }).click();
      await page.getByText(email).waitFor();
    }
    await admin.expectAccessible();

    await page.goto('/benches');
    await page.getByRole('button', { name: 'Add a bench…' }).click();
    await page.getByLabel('Name').fill('Bench 7');
    await page.getByRole('button', { name: 'Add it, then enter its first setup' }).click();
    await page.waitForURL('**/new-setup');
    const newSetup = new URL(page.url()).pathname;
    const enter = async (name: RegExp, value: string, stated: string) => {
      const block = page.getByRole('group', { name }).first();
      await block.getByLabel(name).first().fill(value);
      await block.getByLabel('± as stated').fill(stated);
      await block.getByLabel('at k =').fill('2');
    };
    // The plate is a thing of its own, with its certificate; the setup picks it.
    await page.getByRole('link', { name: 'Plates' }).click();
    await page.waitForURL('**/benches/plates');
    await page.getByRole('button', { name: 'Add a plate…' }).click();
    await page.getByLabel('Name', { exact: true }).fill('P-7');
    await enter(/^Slit separation/, '0.25', '0.0002');
    await page.getByText(/a wrong unit/).waitFor();
    await enter(/^Slit separation/, '250', '0.2');
    await enter(/^Slit width/, '50', '0.8');
    await page.getByLabel('Certificate', { exact: true }).fill('Invented certificate P-7');
    await page.getByLabel(/^File of the certificate/).setInputFiles([
      {
        name: 'certificate P-7.pdf',
        mimeType: 'application/pdf',
        buffer: Buffer.from('%PDF-1.7 invented certificate'),
      },
    ]);
    await page.getByRole('link', { name: 'certificate P-7.pdf' }).waitFor();
    await admin.expectAccessible();
    await page.getByRole('button', { name: 'Add it' }).click();
    await page.getByText('on no bench').waitFor();
    const file = await page.getByRole('link', { name: 'certificate P-7.pdf' }).getAttribute('href');
    expect(await (await page.request.get(`${SITE()}${file}`)).text()).toBe('%PDF-1.7 invented certificate');
    await admin.expectAccessible();
    await page.goto(newSetup);
    await page.getByRole('combobox', { name: 'Slit plate' }).selectOption({ label: 'P-7, on no bench' });
    await enter(/^Pixel scale/, '25.4', '0.005');
    await enter(/^Distance/, '500', '0.34');
    await page.getByLabel('Why a new setup').fill('First setup.');
    await admin.expectAccessible();
    await page.getByRole('button', { name: /setup 1/i }).click();
    await page.waitForURL(/\/benches\/\d+$/);
    await page.getByRole('heading', { name: 'Bench 7', exact: true }).waitFor();
    await page.getByRole('heading', { name: 'Setup 1 waits for QA' }).waitFor();
    expect(await page.getByRole('button', { name: /^Approve/ }).count()).toBe(0);
    await admin.expectAccessible();
  });

  test('the admin enters a specification, a source, a lot with units', async () => {
    const { page } = admin;
    await page.goto('/specifications');
    await page.getByRole('button', { name: /^Add a specification/ }).click();
    await page.getByLabel('Name', { exact: true }).fill('Red 635 ± 5');
    await page.getByLabel('Nominal, nm').fill('635');
    await page.getByLabel('Lower limit, nm').fill('630');
    await page.getByLabel('Upper limit, nm').fill('640');
    await page.getByRole('button', { name: /^Add the specification|^Add it/ }).click();
    await page.getByText('Red 635 ± 5').first().waitFor();

    await page.goto('/sources');
    await page.getByRole('button', { name: /^Add a (reference )?source/ }).click();
    // A published line fills the form; what is typed afterwards stands.
    await page.getByLabel('Published line').selectOption('Cd 644 (C′)');
    expect(await page.getByLabel('Wavelength in vacuum, nm').inputValue()).toBe('644.0249');
    expect(await page.getByLabel('Kind', { exact: true }).inputValue()).toBe('lamp-line');
    await page.getByLabel('Published line').selectOption('');
    await page.getByLabel('Kind', { exact: true }).selectOption('stabilised-laser');
    await page.getByLabel('Name', { exact: true }).fill('Reference S-1');
    await page.getByLabel('Wavelength in vacuum, nm').fill('635.1725');
    await page.getByLabel(/^Standard uncertainty/).fill('0.001');
    await page.getByLabel('Certificate or publication').fill('Invented certificate S-1');
    await admin.expectAccessible();
    await page.getByRole('button', { name: /^Add the source|^Add it/ }).click();
    await page.getByText('Reference S-1').first().waitFor();

    await page.goto('/lots');
    await page.getByRole('button', { name: 'Open a lot…' }).click();
    await page.getByLabel('Number', { exact: true }).fill('0001');
    await page.getByRole('button', { name: 'Open the lot' }).click();
    await page.waitForURL(/\/lots\/\d+$/);
    await page.getByRole('button', { name: 'Add units…' }).click();
    await page.getByLabel('Serials').fill('serial;note\nU-101;x\nU-102;y\nU-103\nU-104\nU-105\nU-106');
    await page.getByRole('button', { name: 'Add 6 units' }).click();
    await page.getByText('6 units added').waitFor();
    await admin.expectAccessible();
  });

  test('QA sees what is proposed, declines without a reason in vain, and approves the setup', async () => {
    const { page } = qa;
    await qa.signIn(EMAIL.qa);
    await page.waitForURL('**/over-time**');
    await page.goto('/benches');
    await page.getByText('Setup 1 waits for QA').first().waitFor();
    await page
      .getByRole('link', { name: /Bench 7/ })
      .first()
      .click();
    await page.getByRole('heading', { name: 'Setup 1 waits for QA' }).waitFor();
    await page.getByText('First setup.').first().waitFor();
    await qa.expectAccessible();
    await page.getByRole('button', { name: 'Decline it' }).click();
    await page.getByText('Say why it is declined').waitFor();
    await page.getByLabel('Your word on setup 1').fill('Values compared with the certificates.');
    await page.getByRole('button', { name: 'Approve setup 1' }).click();
    await page.getByText(/approved by QA Q: Values compared with the certificates/).waitFor();
    await qa.expectAccessible();
  });

  test('the pixel scale comes from a photographed ruler and names the stored picture', async () => {
    const { page } = admin;
    await page.goto('/benches');
    await page
      .getByRole('link', { name: /Bench 7/ })
      .first()
      .click();
    await page.waitForURL(/\/benches\/\d+$/);
    await page.goto(`${new URL(page.url()).pathname}/new-setup`);
    await page.getByRole('button', { name: 'Pixel scale from a photographed scale…' }).click();
    await page
      .getByLabel('Picture of the scale')
      .setInputFiles([await fixture('frames/ruler.png', 'ruler.png')]);
    // The ruler of fixtures/ is drawn with 17.3 px from tick to tick, 1 mm apart: 57.803 µm/px.
    await page.getByText(/lines found, 1\.00 mm apart/).waitFor();
    await admin.expectAccessible();
    await page.getByRole('button', { name: 'Use this value' }).click();
    const value = Number(
      await page
        .getByLabel(/^Pixel scale/)
        .first()
        .inputValue(),
    );
    expect(Math.abs(value - 1000 / 17.3)).toBeLessThan(0.02);
    expect(
      await page
        .getByRole('group', { name: /^Pixel scale/ })
        .getByLabel('Certificate', { exact: true })
        .inputValue(),
    ).toMatch(/picture [0-9a-f]{16}/);
  });

  test('the technician takes frames; each says what became of it without a reload', async () => {
    const { page } = technician;
    await technician.signIn(EMAIL.technician);
    await page.waitForURL('**/intake');
    await chooseBench(technician);
    const input = page.locator('input[type=file][multiple]').first();
    await input.setInputFiles([
      await fixture('frames/clean.tif', 'b7-0001-U-101-1.tif'),
      await fixture('frames/tilted.tif', 'b7-0001-U-102-1.tif'),
      await fixture('frames/photo-turned.jpg', 'b7-0001-U-103-1.jpg'),
      await fixture('frames/one-slit.tif', 'b7-0001-U-104-1.tif'),
      await fixture('hostile/truncated.png', 'b7-0001-U-105-1.png'),
      await fixture('hostile/not-a-picture.png', 'b7-0001-U-106-1.png'),
      await fixture('frames/clean.png', 'nameless.png'),
    ]);
    const row = (name: string) => page.getByRole('listitem').filter({ hasText: name });
    for (const name of ['U-101-1.tif', 'U-102-1.tif', 'U-103-1.jpg'])
      await row(name).getByText('Fitted', { exact: true }).waitFor({ timeout: 60_000 });
    await row('U-104-1.tif').getByText('Refused', { exact: true }).waitFor();
    await row('U-105-1.png').getByText('Unreadable', { exact: true }).waitFor();
    await row('U-106-1.png').getByText('Not copied', { exact: true }).waitFor();
    await row('U-106-1.png')
      .getByText(/PNG|picture/)
      .first()
      .waitFor();
    await row('nameless.png')
      .getByText(/No unit of lot 0001/)
      .waitFor();
    await row('nameless.png').getByLabel('Serial of the unit').fill('U-106');
    await row('nameless.png').getByRole('button', { name: 'Send again' }).click();
    await row('nameless.png').getByText('Fitted', { exact: true }).waitFor({ timeout: 60_000 });
    await technician.expectAccessible();

    // The same file again is recognised and stored once.
    await input.setInputFiles([await fixture('frames/clean.tif', 'b7-0001-U-101-1.tif')]);
    await page.getByText('The same file was here already').waitFor();
    expect(await row('U-101-1.tif').count()).toBe(1);

    // Clear ones go with one press; a look asks for a note.
    for (let n = await page.getByRole('button', { name: 'Send as is…' }).count(); n > 0; n -= 1) {
      await page.getByRole('button', { name: 'Send as is…' }).first().click();
      await page.getByRole('textbox', { name: /note/i }).last().fill('Seen on the bench.');
      await page.getByRole('button', { name: 'Send as is', exact: true }).click();
      await page.getByRole('button', { name: 'Send as is', exact: true }).waitFor({ state: 'detached' });
    }
    const send = page.getByRole('button', { name: /^Send [1-9]\d* to review/ });
    if (await send.count()) await send.click();
    await page
      .getByText(/sent to review/)
      .first()
      .waitFor();
  });

  test('a line scan is asked for its detector, fitted in mm, corrected on its page and sent to review', async () => {
    const { page } = technician;
    const input = page.locator('input[type=file][multiple]').first();
    const row = page.getByRole('listitem').filter({ hasText: 'U-104 scan.csv' });
    await input.setInputFiles([
      { name: 'U-104 scan.csv', mimeType: 'text/csv', buffer: Buffer.from(scanText(SCAN)) },
      { name: 'U-103 table.csv', mimeType: 'text/csv', buffer: Buffer.from('unit,verdict\nU-103,within\n') },
    ]);
    await page
      .getByRole('listitem')
      .filter({ hasText: 'U-103 table.csv' })
      .getByText(/neither a picture nor a line scan/)
      .waitFor();
    await page.getByText('1 line scan').waitFor();
    await technician.expectAccessible();
    await page.getByLabel('Width of the detector, mm').fill('0,3');
    await page.getByRole('button', { name: 'Add the scan' }).click();
    await row.getByText('Fitted', { exact: true }).waitFor({ timeout: 60_000 });
    await row.getByText(/0\.3 mm detector/).waitFor();

    await row.getByRole('link', { name: 'U-104' }).click();
    await page.waitForURL(/\/frames\/\d+/);
    const value = page.locator('.qty.result b').first();
    const shown = async () => Number((await value.innerText()).replace(/\s/g, ''));
    expect(Math.abs((await shown()) - TRUE_NM)).toBeLessThan(1);
    await page.getByRole('img', { name: 'Scan U-104 scan.csv' }).waitFor();
    await technician.expectAccessible();

    await page.getByRole('slider', { name: 'Left jaw' }).press('Shift+ArrowRight');
    await page.getByLabel(/^Width of the detector/).fill('0.2');
    await page.getByLabel(/^Width of the detector/).press('Enter');
    await page.getByRole('button', { name: 'Keep this region' }).click();
    await page.waitForURL(/reading=\d+/);
    expect(await page.getByLabel('From, mm').inputValue()).toBe('−7.0');
    expect(Math.abs((await shown()) - TRUE_NM)).toBeLessThan(1);
    const note = page.getByLabel('Note for the reviewer');
    if (await note.isVisible()) await note.fill('A scan, taken with the counter.');
    await page.getByRole('button', { name: /^Send to review/ }).click();
    await page
      .getByText(/to review/i)
      .first()
      .waitFor();
  });

  test('frames are listed, filtered by state and found by serial; the address keeps it', async () => {
    const { page } = technician;
    await page.goto('/frames?state=refused&days=0');
    await page.getByText('U-104').first().waitFor();
    expect(await page.getByText('U-101').count()).toBe(0);
    await page.goto('/frames?find=U-102&days=0');
    await page.getByText('U-102').first().waitFor();
    expect(await page.getByText('U-104').count()).toBe(0);
    await technician.expectAccessible();
  });

  test('the reviewer sees the value, changes the region and keeps it, answers looks and accepts with the password', async () => {
    const { page } = reviewer;
    await reviewer.signIn(EMAIL.reviewer);
    await page.waitForURL(/\/review/);
    await page.goto('/frames?find=U-101&days=0');
    await page.getByRole('link', { name: /U-101/ }).first().click();
    await page.waitForURL(/\/(review|frames)\/\d+/);
    const frameUrl = page.url();
    if (frameUrl.includes('/frames/'))
      await page
        .getByRole('link', { name: /review/i })
        .last()
        .click();
    await page.waitForURL(/\/review\/\d+/);
    const shown = Number((await page.locator('.qty.result b').first().innerText()).replace(/\s/g, ''));
    expect(Math.abs(shown - TRUE_NM)).toBeLessThan(1);
    await reviewer.expectAccessible();

    // Once the bands are here, a change is fitted by this browser: the numbers change and nothing is asked of the server.
    await page.getByText('Live; the server confirms on keeping').waitFor();
    await page.waitForLoadState('networkidle');
    const asked: string[] = [];
    // That the page is open is said every ten seconds; it is not about the change.
    const listen = (request: Request) => {
      const { pathname } = new URL(request.url());
      if (!pathname.endsWith('/looking')) asked.push(`${request.method()} ${pathname}`);
    };
    page.on('request', listen);
    const change = page.getByRole('region', { name: 'Before and after the change' });
    const centres = change.getByRole('row', { name: /^centres/ });
    await setField(page, /^Length/, '400');
    await change.getByRole('columnheader', { name: 'With the change' }).waitFor();
    const few = (await centres.innerText()).split(/\s+/).at(-1);
    await setField(page, /^Length/, '600');
    await centres.filter({ hasNotText: new RegExp(`${few}$`) }).waitFor();
    expect(asked).toEqual([]);
    // Turned by more than 0.1 degrees, the region needs bands of its own; the browser goes on from them.
    await setField(page, /^Tilt/, '0.9');
    await page.getByText('Making new bands for this region…').waitFor();
    await page.getByText('Live; the server confirms on keeping').waitFor();
    await change.getByRole('columnheader', { name: 'With the change' }).waitFor();
    expect(asked).toEqual([expect.stringMatching(/^POST \/api\/frames\/\d+\/stack$/)]);
    page.off('request', listen);
    await reviewer.expectAccessible();
    await page.getByRole('button', { name: 'Drop the change' }).click();
    await change.waitFor({ state: 'detached' });

    // By keys alone: a jaw moves, the result is read aloud, undo and redo, a tenth of a step, the sheet of keys.
    const said = page.locator('[data-said=result]');
    await page.getByRole('slider', { name: 'Right jaw' }).focus();
    await page.keyboard.press('Shift+ArrowLeft');
    await said.filter({ hasText: /plus or minus .* nanometres in air.* (up|down) by .* u\./ }).waitFor();
    await page.keyboard.press('Control+z');
    await change.waitFor({ state: 'detached' });
    await page.keyboard.press('Control+Shift+z');
    await change.getByText(/nm, .* u$/).waitFor();
    await page.getByRole('button', { name: 'Undo' }).click();
    await change.waitFor({ state: 'detached' });
    const length = page.getByLabel(/^Length/);
    const before = Number((await length.inputValue()).replace('−', '-'));
    await length.focus();
    await page.keyboard.press('Alt+ArrowUp');
    const after = Number((await length.inputValue()).replace('−', '-'));
    expect(Math.abs(after - before)).toBeLessThan(0.65);
    await change.waitFor();
    await page.getByRole('button', { name: 'Drop the change' }).click();
    await page.getByRole('button', { name: 'Keys' }).first().click();
    await page.getByRole('checkbox', { name: 'Single-letter keys are on' }).uncheck();
    await page.getByRole('button', { name: 'Close' }).click();
    await page.locator('h1').first().click();
    await page.keyboard.press(']');
    expect(await change.count()).toBe(0);
    await page.keyboard.press('?');
    await page.getByRole('checkbox', { name: 'Single-letter keys are on' }).check();
    await page.getByRole('button', { name: 'Close' }).click();

    await page.getByPlaceholder(/A word on this reading/).fill('Seen at the bench, @QA');
    await page.getByRole('button', { name: 'QA Q' }).click();
    await page.getByRole('button', { name: 'Say it' }).click();
    await page.getByText('QA Q gets a mail').waitFor();

    await setField(page, /^Height/, '90');
    await page.getByRole('button', { name: 'Keep this region' }).click();
    await page.waitForURL((url) => url.href !== frameUrl && /\/review\/\d+/.test(url.pathname));
    await page.getByText('Readings of this frame').waitFor();
    const why = page.getByLabel('Why the value was moved');
    if (await why.isVisible()) await why.fill('The lower rows are dim.');

    await answerLooks(reviewer);
    await page.getByRole('button', { name: 'Accept', exact: true }).click();
    await page.getByLabel('Your password signs it').fill('not the password');
    await page.getByRole('button', { name: 'Sign and accept' }).click();
    await page
      .getByText(/password/i)
      .filter({ hasText: /not|wrong/i })
      .first()
      .waitFor();
    await page.getByLabel('Your password signs it').fill(PASSWORD);
    await page.getByRole('button', { name: 'Sign and accept' }).click();
    await page
      .getByText(/accepted/i)
      .first()
      .waitFor();
  });

  test('whoever took the frame cannot accept it, whatever roles they hold', async () => {
    const { page } = both;
    await both.signIn(EMAIL.both);
    await page.goto('/intake');
    await chooseBench(both);
    await page
      .locator('input[type=file][multiple]')
      .first()
      .setInputFiles([await fixture('frames/clean.png', 'b7-U-105-2.png')]);
    await page
      .getByRole('listitem')
      .filter({ hasText: 'U-105-2' })
      .getByText('Fitted', { exact: true })
      .waitFor({ timeout: 60_000 });
    const send = page.getByRole('button', { name: /^Send [1-9]\d* to review/ });
    if (await send.count()) await send.click();
    else {
      await page.getByRole('button', { name: 'Send as is…' }).click();
      await page.getByRole('textbox', { name: /note/i }).last().fill('Seen.');
      await page.getByRole('button', { name: 'Send as is', exact: true }).click();
    }
    await page
      .getByText(/sent to review/)
      .first()
      .waitFor();
    await page.goto('/frames?find=U-105&state=review&days=0');
    await page.getByRole('link', { name: /U-105/ }).first().click();
    await page.waitForURL(/\/(review|frames)\/\d+/);
    if (page.url().includes('/frames/'))
      await page
        .getByRole('link', { name: /review/i })
        .last()
        .click();
    await page.waitForURL(/\/review\/\d+/);
    await page
      .getByText(/took|uploaded/i)
      .first()
      .waitFor();
    expect(await page.getByRole('button', { name: 'Accept', exact: true }).isDisabled()).toBe(true);
  });

  test('two at once: the second is told and nothing is overwritten', async () => {
    const first = reviewer.page;
    await first.goto('/frames?find=U-102&state=review&days=0');
    await first.getByRole('link', { name: /U-102/ }).first().click();
    await first.waitForURL(/\/(review|frames)\/\d+/);
    if (first.url().includes('/frames/'))
      await first
        .getByRole('link', { name: /review/i })
        .last()
        .click();
    await first.waitForURL(/\/review\/\d+/);
    const second = both.page;
    await second.goto(first.url());
    await answerLooks(reviewer);
    await answerLooks(both);
    // The first has signed a moment ago: the page says that this password still counts, and asks for none.
    await first.getByText(/the password you typed counts until/).waitFor();
    await first.getByRole('button', { name: 'Accept', exact: true }).click();
    expect(await first.getByLabel('Your password signs it').count()).toBe(0);
    await second.getByRole('button', { name: 'Accept', exact: true }).click();
    await second.getByLabel('Your password signs it').fill(PASSWORD);
    await first.getByRole('button', { name: 'Sign and accept' }).click();
    await first
      .getByText(/accepted/i)
      .first()
      .waitFor();
    await second.getByRole('button', { name: 'Sign and accept' }).click();
    await second
      .getByRole('alert')
      .or(second.getByRole('status'))
      .filter({ hasText: /Reviewer R|meanwhile|accepted/ })
      .first()
      .waitFor();
  });

  test('a reading goes back with a reason and stands on the technician’s frame', async () => {
    const { page } = reviewer;
    await page.goto('/frames?find=U-103&state=review&days=0');
    await page.getByRole('link', { name: /U-103/ }).first().click();
    await page.waitForURL(/\/(review|frames)\/\d+/);
    if (page.url().includes('/frames/'))
      await page
        .getByRole('link', { name: /review/i })
        .last()
        .click();
    await page.getByRole('button', { name: 'Return…' }).click();
    await page.getByRole('button', { name: 'Take the frame again' }).click();
    await page.getByLabel('For the technician').fill('Nearer, and without the lamp.');
    await page.getByRole('button', { name: /^Return U-103/ }).click();
    await page
      .getByText(/returned/i)
      .first()
      .waitFor();
    await technician.page.goto('/frames?find=U-103&state=returned&days=0');
    await technician.page.getByRole('link', { name: /U-103/ }).first().click();
    await technician.page.waitForURL(/\/frames\/\d+/);
    await technician.page.getByRole('heading', { name: 'U-103' }).waitFor();
    await technician.page.getByText('Nearer, and without the lamp.').waitFor();
    await technician.expectAccessible();
  });

  test('QA sees the accepted readings over time, their table and CSV, and the log', async () => {
    const { page } = qa;
    await page.goto('/over-time');
    await page.getByRole('heading', { name: 'Over time' }).waitFor();
    const csv = await page.getByRole('link', { name: 'Save as CSV' }).getAttribute('href');
    const answer = await page.request.get(new URL(csv ?? '', SITE()).href);
    expect(answer.status()).toBe(200);
    const lines = (await answer.text()).trim().split(/\r?\n/);
    expect(lines).toHaveLength(3); // a head and two accepted readings
    await qa.expectAccessible();
    await page.goto('/log');
    await page.getByText('Reading accepted').filter({ visible: true }).first().waitFor();
    await qa.expectAccessible();
  });

  test('an accepted reading is withdrawn by two people and leaves the chart; its history tells it', async () => {
    const { page } = reviewer;
    await page.goto('/frames?find=U-101&days=all&state=accepted');
    await page.getByRole('link', { name: /U-101/ }).first().click();
    await page.waitForURL(/\/frames\/\d+/);
    await page.getByRole('button', { name: 'Withdraw…' }).click();
    await page.getByLabel('Why it is to be withdrawn').fill('The plate was another one.');
    await page.getByLabel('Your password signs it').fill(PASSWORD);
    await page.getByRole('button', { name: 'Ask to withdraw it' }).click();
    await page.getByText('Another reviewer or QA confirms it').waitFor();
    await reviewer.expectAccessible();

    await qa.page.goto('/withdrawals');
    await qa.expectAccessible();
    await qa.page.getByRole('link', { name: 'U-101' }).click();
    await qa.page.getByRole('button', { name: 'Confirm…' }).click();
    await qa.page.getByLabel('Your password signs it').fill(PASSWORD);
    await qa.page.getByRole('button', { name: 'Withdraw it' }).click();
    await qa.page.getByText('Withdrawn by Reviewer R and QA Q.').waitFor();
    await qa.page.getByRole('link', { name: 'The whole history' }).click();
    await qa.page.getByText('Withdrawn, confirmed by a second person').waitFor();
    await qa.page.getByText('Region tried, none kept').first().waitFor();
    await qa.expectAccessible();
    await qa.page.goto('/over-time');
    await qa.page.getByRole('heading', { name: 'Withdrawn, not in the limits' }).waitFor();
  });

  test('the queue says why each reading stands where it stands; clean ones are signed together', async () => {
    const { page } = reviewer;
    await page.goto('/review/queue');
    await page.getByRole('heading', { name: 'To review' }).waitFor();
    await reviewer.expectAccessible();
    await page.goto('/review/sheet');
    await page.getByRole('heading', { name: 'Contact sheet' }).waitFor();
    await reviewer.expectAccessible();
    const sign = page.getByRole('button', { name: /^Sign and accept/ });
    if (await sign.count()) {
      for (const tick of await page.getByRole('checkbox', { name: /^Accept / }).all()) await tick.focus();
      const password = page.getByLabel('Your password signs them');
      if (await password.count()) await password.fill(PASSWORD);
      await sign.click();
      await page.getByText(/readings? accepted/).waitFor();
    }
  });

  test('roles end at their doors, on pages and on routes', async () => {
    await technician.page.goto('/people');
    expect(new URL(technician.page.url()).pathname).toBe('/not-allowed');
    await technician.page.goto('/log');
    expect(new URL(technician.page.url()).pathname).toBe('/not-allowed');
    const upload = await qa.page.request.post(`${SITE()}/api/upload?name=a.png&benchId=1`, {
      data: Buffer.from('x'),
      headers: { origin: SITE() },
    });
    expect(upload.status()).toBe(403);
    const outsider = await Desk.open(browser);
    expect((await outsider.page.request.get(`${SITE()}/api/frames/1/photo`)).status()).toBe(401);
    await outsider.page.goto('/frames/1');
    expect(new URL(outsider.page.url()).pathname).toBe('/sign-in');
    await outsider.close();
  });

  test('switching a person off ends their session at once', async () => {
    const { page } = admin;
    await page.goto('/people');
    await page.getByRole('button', { name: 'Change Technician T' }).click();
    await page.getByRole('checkbox', { name: 'May sign in' }).uncheck();
    await page.getByRole('button', { name: 'Keep the change' }).click();
    await page.getByText('switched off', { exact: true }).waitFor();
    await technician.page.goto('/intake');
    expect(new URL(technician.page.url()).pathname).toBe('/sign-in');
  });

  test('phone and tablet, paper and Goggles keep everything on the page', async () => {
    const places = [
      '/frames?days=0',
      '/review',
      '/review/queue',
      '/withdrawals',
      '/your-mail',
      '/over-time',
      '/benches',
      '/lots',
    ];
    for (const width of [1180, 390, 320]) {
      await reviewer.page.setViewportSize({ width, height: 820 });
      for (const place of places) {
        await reviewer.page.goto(place);
        await reviewer.page.waitForLoadState('networkidle');
        await (width === 390 ? reviewer.expectAccessible() : reviewer.expectNoSideways());
      }
    }
    await reviewer.page.setViewportSize({ width: 1440, height: 900 });
    await reviewer.page.getByRole('button', { name: /paper/i }).click();
    await reviewer.page.getByRole('button', { name: /Goggles/ }).click();
    for (const place of ['/frames?days=0', '/over-time', '/benches']) {
      await reviewer.page.goto(place);
      await reviewer.page.waitForLoadState('networkidle');
      expect(
        await reviewer.page.evaluate(() => [
          document.documentElement.dataset.theme,
          document.documentElement.dataset.light,
        ]),
      ).toEqual(['paper', 'neutral']);
      await reviewer.expectAccessible();
    }
  }, 300_000);
});

/** Makes Bench 7 the bench in use and waits until frames can be added. */
async function chooseBench(desk: Desk): Promise<void> {
  await desk.page
    .getByRole('button', { name: /Bench 7/ })
    .last()
    .click();
  await desk.page.waitForFunction(() =>
    [...document.querySelectorAll('button')].some((b) => b.textContent === 'Choose frames' && !b.disabled),
  );
}

/** Gives every open look an answer and a reason. */
async function answerLooks(desk: Desk): Promise<void> {
  const looks = desk.page.getByRole('group', { name: /^Answer:/ });
  for (let i = 0; i < (await looks.count()); i += 1) {
    await looks.nth(i).getByRole('button', { name: 'Accept as is' }).click();
    await desk.page
      .getByLabel(/^Reason for the answer/)
      .nth(i)
      .fill('Small against U.');
  }
}

/** Types a number into a field of the region. */
async function setField(page: Page, name: RegExp, value: string): Promise<void> {
  const field = page.getByRole('spinbutton', { name }).or(page.getByRole('textbox', { name })).first();
  await field.fill(value);
  await field.press('Enter');
}
