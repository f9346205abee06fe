import {
  addPriceRequest,
  booksCsvQuery,
  booksPageQuery,
  booksQuery,
  booksResponse,
  costResponse,
  cylinderBookPage,
  differencesResponse,
  jobBookPage,
  peopleBooks,
  priceResponse,
  purchasePage,
  supplierBooks,
} from '../../shared/books/books.schema.ts';
import { JOURNALLED, JOURNALLED_GET_PROBLEMS, refuseUnasked, sendJournalledCsv } from '../exports/send-csv.ts';
import { type ApiRoutes, apiRoutes, ok } from '../http/api-routes.ts';
import type { Parts } from '../http/parts.ts';
import { madeOrFound, REPEATABLE } from '../registers/register-routes.ts';
import { listCylinders, listJobs, listPeople, listPurchases, listSuppliers } from './book-lines.service.ts';
import { getBooks, getDifferences } from './books.service.ts';
import { booksCsv } from './books-csv.service.ts';
import { getCost } from './cost.service.ts';
import { CSV_ANSWER } from './csv-table.ts';
import { addPrice } from './price.service.ts';

export function bookRoutes(parts: Parts): ApiRoutes {
  const routes = apiRoutes(parts, 'Books');
  const reads = { method: 'get', access: 'books:read' } as const;
  routes.add(
    {
      ...reads,
      path: '/books',
      summary: 'Where it went: opening, purchases and recovered against every place, with each kind of difference',
      description: 'By booking month. A reversal is taken off what it reverses, in the month in which it is booked.',
      query: booksQuery,
      responses: { 200: booksResponse },
    },
    async ({ actor, query }) => ok(await getBooks(parts, actor, query)),
  );
  routes.add(
    {
      ...reads,
      path: '/books/differences',
      summary:
        'What the scales do not explain first: each difference with book, scale, uncertainty and whose hands it was in',
      query: booksQuery,
      responses: { 200: differencesResponse },
    },
    async ({ actor, query }) => ok(await getDifferences(parts, actor, query)),
  );
  routes.add(
    {
      ...reads,
      path: '/books/cylinders',
      summary: 'By cylinder',
      query: booksPageQuery,
      responses: { 200: cylinderBookPage },
    },
    async ({ actor, query }) => ok(await listCylinders(parts, actor, query)),
  );
  routes.add(
    {
      ...reads,
      path: '/books/people',
      summary: 'By person and van',
      query: booksQuery,
      responses: { 200: peopleBooks },
    },
    async ({ actor, query }) => ok(await listPeople(parts, actor, query)),
  );
  routes.add(
    {
      ...reads,
      path: '/books/suppliers',
      summary: 'By supplier',
      query: booksQuery,
      responses: { 200: supplierBooks },
    },
    async ({ actor, query }) => ok(await listSuppliers(parts, actor, query)),
  );
  routes.add(
    {
      ...reads,
      path: '/books/jobs',
      summary: 'By job, with the cost of what went in',
      query: booksPageQuery,
      responses: { 200: jobBookPage },
    },
    async ({ actor, query }) => ok(await listJobs(parts, actor, query)),
  );
  routes.add(
    {
      ...reads,
      path: '/books/cost',
      summary: 'Cost of what went in, was lost, differs and is on hand, at the weighted average of each booking month',
      query: booksQuery,
      responses: { 200: costResponse },
    },
    async ({ actor, query }) => ok(await getCost(parts, actor, query)),
  );
  routes.add(
    {
      ...reads,
      path: '/books/purchases',
      summary: 'What was bought, with its price',
      query: booksPageQuery,
      responses: { 200: purchasePage },
    },
    async ({ actor, query }) => ok(await listPurchases(parts, actor, query)),
  );
  routes.add(
    {
      method: 'post',
      path: '/books/prices',
      summary: 'The price of what a group bought',
      description: `${REPEATABLE} The last price of a purchase counts; earlier ones stay in the chain.`,
      access: 'books:settle',
      body: addPriceRequest,
      responses: { 201: priceResponse, 200: priceResponse },
      problems: ['idReused'],
    },
    async ({ actor, body }) => madeOrFound(await addPrice(parts, actor, body)),
  );
  routes.add(
    {
      ...reads,
      path: '/books.csv',
      summary: 'One table of the books as CSV',
      query: booksCsvQuery,
      description: JOURNALLED,
      responses: { 200: CSV_ANSWER },
      problems: JOURNALLED_GET_PROBLEMS,
    },
    async ({ req, actor, query, res }) => {
      refuseUnasked(req);
      const text = await booksCsv(parts, actor, query);
      const fileName = `books-${query.table}-${query.from}-${query.to}.csv`;
      await sendJournalledCsv(parts, actor, res, { document: 'books', filters: query, fileName, text });
      return undefined;
    },
  );
  return routes;
}
