// site.js GRIDLEAK OUT MANY: the archive's pages in a real browser, opened as files. OUT is the example with
// a hostile and a broken job, MANY 60 synthetic ones. What is wrong is said, exit status 1.
'use strict';
const path = require('path');
const { execFileSync } = require('child_process');
const { pathToFileURL } = require('url');
const { chromium } = require('playwright-core');

const [gridleak, out, many] = process.argv.slice(2);
const fs = require('fs');
const axe = require.resolve('axe-core/axe.min.js');
const rules = ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa', 'best-practice'];
let wrong = 0, checks = 0;
function check(good, text) {
  checks++;
  if (good) return;
  wrong++;
  console.log(`FAIL: ${text}`);
}
function same(actual, expected, text) {
  check(JSON.stringify(actual) === JSON.stringify(expected),
    `${text}: ${JSON.stringify(actual)}, not ${JSON.stringify(expected)}`.slice(0, 600));
}
const url = (folder, name) => pathToFileURL(path.join(folder, name)).href;

// Any request that is not one of the page's own files fails the test.
async function open(browser, options, folder) {
  const context = await browser.newContext(options);
  const page = await context.newPage();
  page.on('request', (request) => {
    const own = request.url().startsWith(pathToFileURL(folder).href) || request.url().startsWith('data:');
    check(own, `request leaves the page: ${request.url()}`);
  });
  page.on('requestfailed', (request) => check(false, `missing: ${request.url()}`));
  page.on('pageerror', (error) => check(false, `script: ${error.message}`));
  page.on('console', (message) => { if (message.type() === 'error') check(false, `console: ${message.text()}`); });
  return page;
}

async function axeOn(page, name) {
  await page.addScriptTag({ path: axe });
  await laidOut(page);
  const result = await page.evaluate((tags) => axe.run(document, { runOnly: tags, preload: false }), rules);
  for (const rule of result.violations)
    check(false, `${name}: ${rule.id}: ${rule.help}: ${rule.nodes[0].html.slice(0, 200)}`);
  check(result.passes.length > 10, `${name}: axe looked at nothing`);
}

// Rows beyond the first screen are drawn in the frame after it.
const drawn = (page) => page.evaluate(() => new Promise((done) => {
  requestAnimationFrame(() => setTimeout(() => requestAnimationFrame(done), 0));
}));
// And laid out when the typing pauses.
const laidOut = (page) => page.waitForFunction(() => !document.querySelector('.stale, .later'));
const heads = async (page, table) => {
  await drawn(page);
  return page.$$eval(`#${table} tbody th`, (all) => all.map((th) => th.textContent));
};

function find(folder, terms) {
  try {
    const lines = execFileSync(gridleak, ['find', '--json', '-o', folder, ...terms], { encoding: 'utf8', maxBuffer: 1 << 26, stdio: ['ignore', 'pipe', 'ignore'] });
    return lines.split('\n').filter(Boolean).map((line) => JSON.parse(line));
  } catch (error) {
    if (error.status === 1 || error.status === 2) return [];
    throw error;
  }
}
async function type(page, text) {
  await page.fill('#q', text);
}

// The page and the shell find the same parts and jobs.
async function searches(browser) {
  const queries = [
    ['curlew'], ['coupling'], ['place=coupling', 'outcome=fail'], ['PELLWORTH', 'coupling'], ['pass'], ['bypass'],
    ['"waxed paper"'], ['type="waxed paper"', 'done=restuffed'], ['valve=6v6'], ['valve=ECL', 'c'], ['year=1951'],
    ['year=1950..1955'], ['decade=1950s', 'mica'], ['from=2031-01', 'to=2033-12-31'], ['due=2036-12-31'], ['due=2041-06'],
    ['batch=2029'], ['supply="live chassis"'], ['kind=valve'], ['was="earlier repair"'], ['left=fail'], ['elodie'],
    ['<b>2039'], ['img'], ['zzzz'], ['c14'], ['0.05'], ['outcome="conditional fail"'], ['maker=harkaway', 'place=reservoir'],
    ['made=up'], ['serial=118204'], ['unread=unread'], ['in_progress=true'], ['uf', '350', 'tuning'],
  ];
  const page = await open(browser, { viewport: { width: 1280, height: 900 } }, out);
  await page.goto(url(out, 'index.html'));
  let found = 0;
  for (const query of queries) {
    await type(page, query.join(' '));
    const hits = find(out, query.map((term) => term.replace(/"/g, '')));
    const parts = hits.filter((hit) => hit.hit === 'part').map((hit) => `${hit.set.job} ${hit.ref}`).sort();
    const jobs = [...new Set(hits.map((hit) => (hit.hit === 'part' ? hit.set.job : hit.job)))].sort();
    found += parts.length;
    same((await heads(page, 'parts')).sort(), parts.slice(0, 200), `parts of ${query.join(' ')}`);
    same((await heads(page, 'sets')).sort(), jobs, `sets of ${query.join(' ')}`);
    const status = await page.textContent('#status');
    const says = query[0] === 'made=up' ? 'No fact is named made.'
      : !jobs.length ? 'Nothing was found among ' : parts.length ? `${parts.length} part${parts.length === 1 ? '' : 's'} in ` : `${jobs.length} set`;
    check(status.startsWith(says), `status of ${query.join(' ')}: ${status}`);
    check((await page.isVisible('#parts-found')) === parts.length > 0, `parts shown for ${query.join(' ')}`);
  }
  check(found > 100, `the queries found only ${found} parts`);
  check(!(await page.evaluate('window.injected')), 'a job put script into the page');
  same(await page.$$eval('img, main b, main i', (all) => all.length), 0, 'markup out of a job');
  await page.context().close();
}

// Words grow and shrink a letter at a time: the answer to a longer one is looked for in the shorter one's.
async function letterByLetter(browser) {
  const page = await open(browser, { viewport: { width: 1280, height: 900 } }, many);
  await page.goto(url(many, 'index.html'));
  const sets = fs.readdirSync(path.join(many, 'jobs')).length;
  let smaller = 0;
  async function compare(text) {
    await drawn(page);
    const hits = find(many, text.trim().split(/\s+/).map((term) => term.replace(/"/g, '')));
    const parts = hits.filter((hit) => hit.hit === 'part').map((hit) => `${hit.set.job} ${hit.ref}`);
    const jobs = [...new Set(hits.map((hit) => (hit.hit === 'part' ? hit.set.job : hit.job)))];
    const status = (await page.textContent('#status')).replace(/\u2009/g, '');
    const says = !jobs.length ? `Nothing was found among ${sets} sets.`
      : `${parts.length ? `${parts.length} part${parts.length === 1 ? '' : 's'} in ` : ''}${jobs.length} set${jobs.length === 1 ? '' : 's'}, of ${sets}.`;
    same(status, says, `letter by letter, ${text}`);
    same(await heads(page, 'parts'), parts.slice(-200).reverse(), `parts, latest job first, ${text}`);
    same((await heads(page, 'sets')).sort(), jobs.sort(), `sets, ${text}`);
    return parts.length;
  }
  for (const text of ['waxed coup fail', 'maker=lind c1', 'place=coupling', 'outcome=conditional', 'batch=20', '0.05 m', 'year=195']) {
    await page.fill('#q', '');
    await page.focus('#q');
    let before = Infinity;
    for (let length = 1; length <= text.length; length++) {
      await page.keyboard.type(text[length - 1]);
      if (/[ =]/.test(text[length - 1])) continue;
      const parts = await compare(text.slice(0, length));
      if (parts < before) smaller++;
      before = parts;
    }
    for (let length = text.length - 1; length > text.length - 4; length--) {
      await page.keyboard.press('Backspace');
      if (!/[ =]$/.test(text.slice(0, length))) await compare(text.slice(0, length));
    }
    // A letter in front makes another word.
    if (text.includes('=')) continue;
    await page.keyboard.press('Home');
    await page.keyboard.type('r');
    await compare(`r${text.slice(0, -3)}`);
  }
  check(smaller > 15, `words grew ${smaller} times to fewer parts only`);
  await page.context().close();
}

// The lists as they are heard and printed, however they are drawn.
async function lists(browser) {
  const phone = await open(browser, { viewport: { width: 390, height: 844 } }, many);
  await phone.goto(`${url(many, 'index.html')}#q=capacitor`);
  const top = await phone.evaluate(() => document.getElementById('status').getBoundingClientRect().bottom);
  check(top < 422, `the answer on a phone stands at ${top}, under the keyboard`);
  check(await phone.isHidden('#filter-place'), 'filters fold away on a phone');
  await phone.click('summary');
  await phone.selectOption('#filter-place', 'coupling');
  same(await phone.inputValue('#q'), 'capacitor place=coupling', 'a filter on a phone');
  await phone.fill('#q', 'zzzz');
  check((await phone.isHidden('#sets')) && (await phone.isHidden('#parts')), 'no empty tables');
  await phone.context().close();
  for (const width of [1280, 390]) {
    const page = await open(browser, { viewport: { width, height: 900 } }, many);
    await page.goto(`${url(many, 'index.html')}#q=coupling`);
    await laidOut(page);
    const session = await page.context().newCDPSession(page);
    const { nodes } = await session.send('Accessibility.getFullAXTree');
    const heard = {};
    for (const node of nodes) if (!node.ignored) heard[node.role.value] = (heard[node.role.value] || 0) + 1;
    const rows = await page.$$eval('#parts tr, #sets tr', (all) => all.length);
    same([heard.table, heard.row, heard.rowheader, heard.columnheader], [2, rows, rows - 2, 16], `tables heard at ${width}`);
    check(rows > 250, `only ${rows} rows to hear`);
    // A link far down is reached by the keyboard, and comes into view.
    await page.focus('#sets tbody:last-of-type tr:last-child a, #sets tbody:nth-of-type(3) tr:last-child a');
    check(await page.evaluate(() => {
      const box = document.activeElement.getBoundingClientRect();
      return box.height > 10 && box.top >= 0 && box.bottom <= innerHeight;
    }), `the last link at ${width} is not seen`);
    await page.context().close();
  }
  const page = await open(browser, { viewport: { width: 1280, height: 900 } }, many);
  await page.goto(url(many, 'index.html'));
  same(await page.evaluate(() => {
    const field = document.getElementById('q');
    field.value = 'coupling';
    field.dispatchEvent(new Event('input'));
    window.dispatchEvent(new Event('beforeprint'));
    return document.querySelectorAll('#parts tbody tr').length;
  }), 200, 'printed right after a letter');
  check(!page.url().includes('#'), 'the address changes with every letter');
  await page.waitForTimeout(300);
  check(page.url().endsWith('#q=coupling'), `the address after a pause: ${page.url()}`);
  await page.context().close();
}

// Where the script or its data cannot be had, the plain table stands.
async function withoutData(browser) {
  const context = await browser.newContext(), page = await context.newPage();
  await page.route(/search-data/, (route) => route.abort());
  await page.goto(url(out, 'index.html'));
  const rows = await page.locator('.jobs tbody tr:visible').count();
  check(rows >= 7, `without its data ${rows} sets are seen`);
  check(await page.isHidden('#find'), 'the field is hidden without data');
  await context.close();
}

async function behaviour(browser) {
  const page = await open(browser, { viewport: { width: 1280, height: 900 } }, out);
  const address = url(out, 'index.html');
  await page.goto(address);
  const all = await heads(page, 'sets');
  check(all.length >= 7, 'the list shows all sets');
  check(await page.isHidden('#clear'), 'nothing to clear');
  // A filter writes its pair, and the pair shows in the filter.
  await page.selectOption('#filter-place', 'avc bypass');
  same(await page.inputValue('#q'), 'place="avc bypass"', 'the filter writes');
  await page.selectOption('#filter-outcome', 'fail');
  same(await page.inputValue('#q'), 'place="avc bypass" outcome=fail', 'a second filter');
  check(page.url().includes('#q=place%3D%22avc%20bypass%22%20outcome%3Dfail'), `address: ${page.url()}`);
  await page.selectOption('#filter-place', '');
  same(await page.inputValue('#q'), 'outcome=fail', 'any takes the pair out');
  await type(page, 'place=coupling done=replaced');
  same(await page.inputValue('#filter-place'), 'coupling', 'a typed pair shows in its filter');
  same(await page.inputValue('#filter-outcome'), '', 'the other filter is any');
  for (const key of ['supply', 'decade', 'place', 'outcome', 'done', 'maker', 'model', 'valve', 'kind', 'type', 'batch', 'from', 'to', 'due'])
    check((await page.$$(`#filter-${key}`)).length === 1, `there is a filter ${key}`);
  await page.click('summary');
  await page.fill('#filter-due', '2036-12-31');
  await page.dispatchEvent('#filter-due', 'change');
  check((await page.inputValue('#q')).endsWith('due=2036-12-31'), 'a date filter writes');
  await page.click('#clear');
  same(await page.inputValue('#q'), '', 'clear');
  same(await heads(page, 'sets'), all, 'all sets again');
  check(await page.evaluate(() => document.activeElement.id === 'q'), 'the field has the focus after clearing');

  // Order, by keyboard; said to screen readers; kept in the address.
  const sorted = (table) => page.$$eval(`#${table} th[aria-sort]`, (all) => all.map((th) => `${th.dataset.k} ${th.getAttribute('aria-sort')}`));
  same(await sorted('sets'), ['returned descending'], 'the usual order');
  await page.focus('#sets th[data-k=job] button');
  await page.keyboard.press('Enter');
  same(await sorted('sets'), ['job ascending'], 'sorted by Enter');
  same(await heads(page, 'sets'), [...all].sort(), 'jobs in order');
  await page.keyboard.press('Space');
  same(await sorted('sets'), ['job descending'], 'the other way by Space');
  same(await heads(page, 'sets'), [...all].sort().reverse(), 'jobs in reverse');
  check(page.url().endsWith('#sets=job.down'), `order in the address: ${page.url()}`);
  await page.click('#sets th[data-k=failed] button');
  const failed = await page.$$eval('#sets tbody tr', (rows) => rows.map((row) => parseInt(row.lastElementChild.textContent, 10)));
  same(failed, [...failed].sort((a, b) => b - a), 'most failures first');
  await type(page, 'capacitor fail');
  await page.click('#parts th[data-k=leakage] button');
  const leakage = await page.$$eval('#parts tbody tr', (rows) => rows.map((row) => row.children[5].textContent.replace(/[\u2009<>]/g, '')));
  const known = leakage.filter(Boolean).map(Number);
  check(known.length > 5, 'leakages are listed');
  const written = await page.$$eval('#parts tbody .n', (all) => all.map((cell) => cell.textContent).filter(Boolean));
  for (const text of written)
    check(/^([<>]\u2009)?(\d{1,4}(\.\d+)?|\d{1,3}(\u2009\d{3})+)$/.test(text), `a number is written ${text}`);
  same(known, [...known].sort((a, b) => b - a), 'most leakage first');
  check(leakage.slice(known.length).every((text) => !text), 'unknown leakage behind');

  // The address brings it all back, in a new page and on going back.
  const kept = page.url(), parts = await heads(page, 'parts');
  const again = await open(browser, { viewport: { width: 1280, height: 900 } }, out);
  await again.goto(kept);
  await drawn(again);
  same(await again.inputValue('#q'), 'capacitor fail', 'words from the address');
  same(await heads(again, 'parts'), parts, 'hits and order from the address');
  await again.evaluate(() => { location.hash = '#q=curlew'; });
  await drawn(again);
  same(await again.inputValue('#q'), 'curlew', 'a changed address is followed');
  await again.evaluate(() => { location.hash = '#q=%E0%A4%A&sets=nonsense.up&x'; });
  await drawn(again);
  same(await heads(again, 'sets'), all, 'a broken address shows all');
  await again.context().close();

  // From the field to the first filter and the first order by Tab alone.
  await page.focus('#q');
  await page.keyboard.press('Tab');
  same(await page.evaluate(() => document.activeElement.id), 'filter-supply', 'Tab goes to the filters');
  // What links lead to is there.
  for (const link of await page.$$eval('main a[href]', (links) => links.map((a) => a.href)))
    check(fs.existsSync(new URL(link.split('#')[0]).pathname.replace(/%([0-9A-F]{2})/g, (x, hex) => String.fromCharCode(parseInt(hex, 16)))), `dead link ${link}`);
  await page.context().close();
}

async function withoutScript(browser) {
  const page = await open(browser, { viewport: { width: 1280, height: 900 }, javaScriptEnabled: false }, out);
  await page.goto(url(out, 'index.html'));
  const rows = await page.locator('.jobs tbody tr:visible').count();
  check(rows >= 7, `without JavaScript ${rows} sets are seen`);
  check(await page.isHidden('#find'), 'the field is hidden without JavaScript');
  check(await page.isHidden('#parts-found'), 'no empty table of parts');
  check(await page.isVisible('text=2040-002'), 'the broken job is listed');
  check(await page.isVisible("text=unknown key 'modell'"), 'and its mistake');
  await page.context().close();
}

async function views(browser) {
  const pages = [[out, 'index.html'], [out, 'index.html#q=coupling%20fail'], [out, 'statistics.html'], [many, 'statistics.html'],
    [many, 'index.html#q=capacitor']];
  for (const folder of [out, many])
    for (const name of fs.readdirSync(path.join(folder, 'models')).sort().slice(0, folder === out ? 9 : 1)) pages.push([folder, `models/${name}`]);
  for (const [folder, name] of pages)
    for (const view of [{ width: 1280, colorScheme: 'light' }, { width: 390, colorScheme: 'dark' }, { width: 320, colorScheme: 'light' }]) {
      const page = await open(browser, { viewport: { width: view.width, height: 900 }, colorScheme: view.colorScheme }, folder);
      await page.goto(url(folder, name.split('#')[0]) + (name.includes('#') ? `#${name.split('#')[1]}` : ''));
      await drawn(page);
      if (await page.$('#more')) await page.evaluate(() => { document.getElementById('more').open = true; });
      const wide = await page.evaluate(() => document.documentElement.scrollWidth);
      check(wide <= view.width, `${name} at ${view.width}: scrolls sideways, ${wide}`);
      const paper = await page.evaluate(() => getComputedStyle(document.documentElement).backgroundColor);
      same(paper, view.colorScheme === 'dark' ? 'rgb(20, 23, 26)' : 'rgb(253, 253, 251)', `${name}: paper`);
      await axeOn(page, `${name} at ${view.width} ${view.colorScheme}`);
      await page.context().close();
    }
}

async function onPaper(browser) {
  const page = await open(browser, { viewport: { width: 1280, height: 900 } }, out);
  await page.goto(`${url(out, 'index.html')}#q=coupling`);
  await page.emulateMedia({ media: 'print' });
  check(await page.isHidden('#find'), 'no field on paper');
  check(await page.isVisible('#parts'), 'the hits on paper');
  same(await page.evaluate(() => getComputedStyle(document.documentElement).backgroundColor), 'rgb(255, 255, 255)', 'white paper');
  const pdf = await page.pdf({ preferCSSPageSize: true });
  check(pdf.length > 5000, 'a PDF comes out');
  await page.context().close();

  // Paper says what was asked and how much is left out; each page has its head; no word is torn.
  const long = await open(browser, { viewport: { width: 1280, height: 900 } }, many);
  await long.goto(`${url(many, 'index.html')}#q=coupling`);
  const file = path.join(many, 'list.pdf');
  await long.pdf({ path: file, preferCSSPageSize: true });
  await long.context().close();
  const text = execFileSync('pdftotext', ['-layout', file, '-'], { encoding: 'utf8' }), pages = text.split('\f').filter((one) => one.trim());
  fs.unlinkSync(file);
  check(/coupling: \d+ parts in/.test(text), 'paper says the words');
  check(/The first 200 of \d+ are shown/.test(text), 'paper says that there are more');
  check(pages.length > 4, `only ${pages.length} pages`);
  for (const [i, one] of pages.slice(0, -1).entries()) check(/Leakage|Returned/.test(one), `page ${i + 1} has no head`);
  check(/Leakage/.test(text) && !/\b(Leaka|conditiona)\b/.test(text), 'a word is torn on paper');
}

// Which call-backs are due hangs on the day only.
async function recall(browser) {
  const page = await open(browser, { viewport: { width: 1280, height: 900 } }, out);
  await page.goto(url(out, 'statistics.html'));
  const links = await page.$$eval('.recall th a', (all) => all.map((a) => [a.textContent, a.href]));
  check(links.some(([batch]) => batch.startsWith('<b>')), 'the hostile batch is listed');
  for (const [batch, href] of links.filter(([batch]) => /^<b>|^2029-W14/.test(batch))) {
    await page.goto(href);
    check((await heads(page, 'parts')).length > 0, `the link of batch ${batch} finds its parts`);
    await page.goto(url(out, 'statistics.html'));
  }
  await page.context().close();
}

async function callBacks(browser) {
  const page = await open(browser, { viewport: { width: 1280, height: 900 } }, out);
  await page.clock.setFixedTime(new Date('2038-01-01T12:00:00'));
  await page.goto(url(out, 'statistics.html'));
  same(await page.$$eval('.due', (all) => all.map((cell) => cell.textContent)), ['2036-03-01, due'], 'due in 2038');
  await page.clock.setFixedTime(new Date('2030-01-01T12:00:00'));
  await page.reload();
  same(await page.$$eval('.due', (all) => all.length), 0, 'due in 2030');
  await page.context().close();
}

(async () => {
  const browser = await chromium.launch({ executablePath: '/usr/bin/chromium', args: ['--no-sandbox', '--disable-gpu', '--disable-quic'] });
  await searches(browser);
  await letterByLetter(browser);
  await behaviour(browser);
  await lists(browser);
  await withoutScript(browser);
  await withoutData(browser);
  await onPaper(browser);
  await callBacks(browser);
  await recall(browser);
  await views(browser);
  await browser.close();
  console.log(`${checks} checks in the browser, ${wrong} wrong`);
  process.exit(wrong ? 1 : 0);
})();
