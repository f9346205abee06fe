import express, { type Request, type Router } from 'express';
import { isLoopbackAddress, isLoopbackName } from '../http/loopback.ts';
import { Problem } from '../http/problem.ts';
import { localeOf } from '../http/request-locale.ts';
import { messageFor } from '../messages/translate.ts';
import type { KeptMail, MailCatcher } from './mail-catcher.ts';

/**
 * `/dev/mail`: the mails that were kept instead of sent. They hold links that open accounts, so the page answers only
 * this very machine: by the connection's address and by the name in the address bar (a foreign name that was pointed at
 * loopback is refused).
 */
export function keptMailPage(catcher: MailCatcher): Router {
  const router = express.Router();
  router.get('/', async (req, res) => {
    if (!fromThisMachine(req)) throw new Problem('notFound');
    const locale = localeOf(req);
    const mails = await catcher.mails();
    const title = messageFor('mailPage.title', locale);
    const list =
      mails.length === 0 ? `<p>${escaped(messageFor('mailPage.none', locale))}</p>` : mails.map(article).join('');
    res
      .set('Cache-Control', 'no-store')
      .type('html')
      .send(`<!doctype html>
<html lang="${locale}">
<head><meta charset="utf-8"><meta name="viewport" content="width=device-width, initial-scale=1"><title>${escaped(title)}</title></head>
<body><main><h1>${escaped(title)}</h1>${list}</main></body>
</html>`);
  });
  return router;
}

function fromThisMachine(req: Request): boolean {
  const name = req.headers.host?.replace(/:\d+$/, '') ?? '';
  return isLoopbackAddress(req.socket.remoteAddress) && isLoopbackName(name);
}

function article({ receivedAt, to, subject, text }: KeptMail): string {
  const body = escaped(text).replaceAll(/https?:\/\/[^\s<]+/g, (link) => `<a href="${link}">${link}</a>`);
  const paragraphs = body.split('\n').join('<br>');
  return `<article><h2>${escaped(subject)}</h2><p>${escaped(to.join(', '))} &middot; <time>${receivedAt}</time></p><p>${paragraphs}</p><hr></article>`;
}

function escaped(text: string): string {
  return text.replaceAll('&', '&amp;').replaceAll('<', '&lt;').replaceAll('>', '&gt;').replaceAll('"', '&quot;');
}
