import { Router } from 'express';
import { getTable, readColumn } from '#contract/tables.ts';
import type { ColumnStore } from '#server/db/column-store.ts';
import { mount } from '#server/lib/mount.ts';
import { createTables } from './tables.service.ts';

/** A published table never changes, so neither does any part of it at its address. */
const FOR_EVER = 'private, immutable, max-age=31536000';

export function tablesRoutes(store: ColumnStore): Router {
  const tables = createTables(store);
  const router = Router();
  mount(router, getTable, ({ params }) => {
    const { id, nRows, purpose, columns } = tables.find(params.depositId, params.tableId);
    return { id, nRows, purpose, columns };
  });
  mount(router, readColumn, ({ params, query, res }) => {
    const { type, length, dtype, pieces } = tables.read(params.depositId, params.tableId, params.column, query);
    res.set({ 'Content-Type': type, 'Cache-Control': FOR_EVER, 'X-Length': String(length) });
    if (dtype) res.set('X-Dtype', dtype);
    for (const piece of pieces) res.write(piece);
    res.end();
  });
  return router;
}
