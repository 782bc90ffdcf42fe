import http from 'node:http';
import { createTransport } from 'nodemailer';
import Papa from 'papaparse';
import type { Browser, Page } from 'playwright-core';
import { expect, it } from 'vitest';
import { mayUse, type Role } from '../../src/domain/access/permissions';
import { addMessage } from '../../src/server/queries/outbox';
import { asIngest } from '../../src/server/db/transaction';
import { sendDue } from '../../src/server/mail/send-outbox';
import { ROUTES } from '../access/routes';
import { hydrated, startBrowser } from '../support/browser';
import { writeOneOfEach } from './rows';
import { emailOf, OWN, type Scene } from './scene';

/** A formula to a spreadsheet, an element with a script to a browser, and nothing to us. */
const PLANT = `=1+1<img src=x onerror="globalThis.planted=1">`;
/** Text that means something to the program, or lets people in. Everything else takes what people type. */
const CODES =
  /^(id|ref|kind|state|stage|status|key|event_key|task|worker|role|theme|time_zone|email|to_address|action|subject|variant|media_type|check_name|step|gap|fingerprint|href|url|unsubscribe_url|secret|totp_secret|password_hash|in_force|measures|faces_allowed|released_by|out_of_box|on_command_loss|structure|rule_set|currency|units|outcome|method|signature|finding|purpose|result|light|stage|commanded|meter_mode|reading_kind|measuring_point|framed_by|reader|origin|family|leased_by|evidence)$/;

/** What people typed long ago, and what pages, tables and letters make of it. */
export function plantedAttacks(scene: () => Scene): void {
  const target = () => {
    const { ref, strings } = scene().fleet.site(OWN);
    return { site: ref, string: [...strings.values()][0]?.ref ?? '' };
  };
  const inBrowser = async (work: (browser: Browser) => Promise<void>): Promise<void> => {
    const browser = await startBrowser();
    try {
      await work(browser);
    } finally {
      await browser.close();
    }
  };
  async function pageOf(browser: Browser, who: Role): Promise<Page> {
    const context = await browser.newContext({ reducedMotion: 'reduce' });
    const [name = '', value = ''] = (await scene().cookieOf(emailOf(who))).split('=');
    await context.addCookies([{ name, value, url: scene().site.url }]);
    return context.newPage();
  }

  it('is in every text that the database holds', async () => {
    const { db, fleet } = scene();
    await writeOneOfEach(db.owner, fleet.site(OWN).id);
    const { rows } = await db.owner.query<{ t: string; c: string }>(
      `select c.relname as t, a.attname as c from pg_class c join pg_attribute a on a.attrelid = c.oid
       where c.relnamespace = 'public'::regnamespace and c.relkind = 'r' and not c.relispartition
         and a.atttypid = 'text'::regtype and a.attgenerated = '' and not a.attisdropped and c.relname !~ '^(knex|installation|session|rate)'`,
    );
    let planted = 0;
    for (const { t, c } of rows.filter((r) => !CODES.test(r.c)))
      try {
        const { rowCount } = await db.owner.query(
          `update ${t} set ${c} = $1 || coalesce(substr(${c}, 1, 12), '')`,
          [PLANT],
        );
        if (rowCount) planted++;
      } catch (error) {
        // a column that takes no such text can't show it: checks, foreign keys, rows that nobody may change
        const known = ['23000', '23514', '23503', '23505', '42501', 'P0001'];
        expect(known, `${t}.${c}: ${String(error)}`).toContain((error as { code?: string }).code);
      }
    await db.owner.query(
      `insert into audit_entry (organisation_id, person_id, site_id, action, subject, before, after)
      select 1, 1, $1, 'people.changed', $2, json_build_object('name', $2::text), json_build_object('name', $2::text)`,
      [fleet.site(OWN).id, PLANT],
    );
    expect(planted).toBeGreaterThan(30);
  });

  it('is text on every page, and runs on none', { timeout: 240_000 }, () =>
    inBrowser(async (browser) => {
      const { site } = scene();
      const pages = ROUTES.filter(
        (r) => r.file.endsWith('.astro') && r.permission !== 'public' && r.served.includes(200),
      );
      const faults: string[] = [];
      let shown = 0;
      for (const who of ['manager', 'customer'] as const) {
        const page = await pageOf(browser, who);
        let path = '';
        page.on('console', (m) => {
          if (m.type() === 'error') faults.push(`${path}: ${m.text()}`);
        });
        page.on('pageerror', (e) => faults.push(`${path}: ${e.message}`));
        const own = pages.filter(
          ({ permission: p }) =>
            p !== 'public' && mayUse(who, p) && (who === 'customer') === mayUse('customer', p),
        );
        for (const route of own) {
          path = route.path(target());
          const response = await page.goto(site.url + path, { waitUntil: 'load' });
          if (response?.status() !== 200) faults.push(`${path}: status ${response?.status()}`);
          await hydrated(page);
          const found = await page.evaluate(() => ({
            ran: 'planted' in globalThis,
            made: document.querySelectorAll('img[src="x"]').length,
            said: document.body.innerText.includes('<img src=x'),
          }));
          if (found.ran || found.made > 0) faults.push(`${path}: ${JSON.stringify(found)}`);
          if (found.said) shown++;
        }
        await page.context().close();
      }
      expect(faults).toEqual([]);
      expect(shown).toBeGreaterThan(10);
    }),
  );

  it('would not run either where a page made elements of it', () =>
    inBrowser(async (browser) => {
      const page = await pageOf(browser, 'manager');
      await page.goto(`${scene().site.url}/people`);
      const refused = await page.evaluate(async (plant) => {
        const said: string[] = [];
        document.addEventListener('securitypolicyviolation', (e) => said.push(e.effectiveDirective));
        document.body.insertAdjacentHTML('beforeend', plant);
        const own = document.createElement('script');
        own.textContent = 'globalThis.planted = 1';
        const theirs = document.createElement('script');
        theirs.src = 'https://elsewhere.example/x.js';
        const frame = document.createElement('iframe');
        frame.src = 'https://elsewhere.example/';
        document.body.append(own, theirs, frame);
        await fetch('https://elsewhere.example/').catch(() => undefined);
        for (let i = 0; i < 100 && new Set(said).size < 5; i++) await new Promise((r) => setTimeout(r, 50));
        return { ran: 'planted' in globalThis, said: [...new Set(said)].sort() };
      }, PLANT);
      expect(refused).toEqual({
        ran: false,
        said: ['connect-src', 'frame-src', 'script-src-attr', 'script-src-elem'],
      });
    }));

  it('is no formula in any table', async () => {
    const { ask, cookieOf } = scene();
    const cookie = await cookieOf(emailOf('manager'));
    const tables = ROUTES.filter(
      (r) => r.method === 'GET' && r.file.includes('.csv') && r.served.includes(200),
    );
    expect(tables.length).toBeGreaterThan(8);
    let harmless = 0;
    for (const route of tables) {
      const response = await ask(route.path(target()), { cookie });
      expect(response.status, route.file).toBe(200);
      const { data } = Papa.parse<string[]>((await response.text()).replace(/^\ufeff/, ''));
      for (const cell of data.flat()) {
        if (cell.startsWith(`'${PLANT.slice(0, 4)}`)) harmless++;
        if (/^\s*[=+\-@\t\r＝＋－＠]/.test(cell))
          expect(Number(cell), `${route.file}: ${cell}`).not.toBeNaN();
      }
    }
    expect(harmless).toBeGreaterThan(5);
  });

  it('is text in a letter, and adds no line to its head', async () => {
    const { ask, cookieOf, db } = scene();
    const body = { name: PLANT, email: 'planted@guests.example', role: 'analyst', sites: [] };
    const invite = (more: object) =>
      cookieOf(emailOf('manager')).then((cookie) =>
        ask('/api/invitations', { method: 'POST', cookie, body: { ...body, ...more } }),
      );
    expect((await invite({})).status).toBeLessThan(300);
    const { rows } = await db.owner.query<{ html: string }>(
      `select html_body as html from message where to_address = 'planted@guests.example'`,
    );
    expect(rows[0]?.html).toContain('=1+1&lt;img');
    expect(rows[0]?.html).not.toContain('<img src=x');
    for (const wrong of [
      { name: 'Vera\r\nBcc: all@guests.example' },
      { email: 'a@guests.example\r\nBcc: all@guests.example' },
      { email: 'a@guests.example,all@guests.example' },
      { email: '"a@guests.example" <all@guests.example>' },
    ])
      expect((await invite(wrong)).status, JSON.stringify(wrong)).toBe(422);

    // and were one ever written: what goes out has one head, as we wrote it
    await db.owner.query('delete from message');
    const tail = '\r\nBcc: all@guests.example\r\n\r\n<b>another body</b>';
    await asIngest((tx) =>
      addMessage(tx, {
        organisationId: 1,
        personId: null,
        siteId: null,
        kind: 'handover',
        eventKey: 'planted',
        to: { address: `owner@guests.example${tail}`, name: `Ruth${tail}` },
        subject: `Your roof${tail}`,
        text: 'x',
        html: '<p>x</p>',
      }),
    );
    const stream = createTransport({ streamTransport: true, buffer: true, newline: 'windows' });
    const sent: { raw: string; to: unknown }[] = [];
    await sendDue(() => new Date(), {
      sendMail: async (mail: Parameters<typeof stream.sendMail>[0]) => {
        const info = await stream.sendMail(mail);
        sent.push({ raw: String(info.message), to: info.envelope.to });
        return info;
      },
    });
    const [head = ''] = (sent[0]?.raw ?? '').split('\r\n\r\n');
    expect(head).toMatch(/^Subject: /m);
    expect(head).not.toMatch(/^(Bcc|<b>)/im);
    expect(JSON.stringify(sent[0]?.to)).not.toMatch(/\\r|\\n/);
  });

  it('a page of somebody else neither frames, posts to, nor listens to the site of who is signed in', () =>
    inBrowser(async (browser) => {
      const { site, db } = scene();
      const page = await pageOf(browser, 'manager');
      // another site to a browser: a name is none of the address's
      const hostile = http.createServer((_req, res) => {
        res.setHeader('content-type', 'text/html');
        res.end(`<!doctype html><iframe name="frame" src="${site.url}/people"></iframe><iframe name="sink"></iframe>
          <form target="sink" method="post" action="${site.url}/api/sign-out"></form>`);
      });
      await new Promise<void>((done) => hostile.listen(0, '127.0.0.1', done));
      try {
        const { port } = hostile.address() as { port: number };
        const before = await db.owner.query('select count(*) from session');
        await page.goto(`http://localhost:${port}/`, { waitUntil: 'load' });
        const heard = await page.evaluate(
          async ({ url, ws }) => {
            document.querySelector('form')?.submit();
            await fetch(`${url}/api/sign-out`, {
              method: 'POST',
              mode: 'no-cors',
              credentials: 'include',
              body: 'x=1',
            }).catch(() => undefined);
            const read = await fetch(`${url}/api/fleet`, { credentials: 'include' }).then(
              (r) => r.status,
              () => 'refused',
            );
            const socket = await new Promise<string>((resolve) => {
              const live = new WebSocket(`${ws}/live`);
              live.onopen = () => resolve('open');
              live.onerror = () => resolve('refused');
            });
            return { read, socket };
          },
          { url: site.url, ws: site.url.replace('http', 'ws') },
        );
        expect(heard).toEqual({ read: 'refused', socket: 'refused' });
        expect(page.frame('frame')?.url()).not.toContain('/people');
        expect(await db.owner.query('select count(*) from session')).toMatchObject({ rows: before.rows });
      } finally {
        hostile.close();
      }
    }));
}
