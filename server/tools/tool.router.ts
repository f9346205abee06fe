import {
  createToolRequest,
  tool,
  toolListQuery,
  toolPage,
  updateToolRequest,
} from '../../shared/tools/tools.schema.ts';
import { type ApiRoutes, apiRoutes } from '../http/api-routes.ts';
import type { Parts } from '../http/parts.ts';
import { addRegister } from '../registers/register-routes.ts';
import { createTool, getTool, listTools, updateTool } from './tool.service.ts';

export function toolRoutes(parts: Parts): ApiRoutes {
  const routes = apiRoutes(parts, 'Tools');
  addRegister(routes, {
    path: '/tools',
    words: { one: 'a tool', many: 'Scales and other tools, by name' },
    write: 'tools:write',
    create: createToolRequest,
    update: updateToolRequest,
    view: tool,
    query: toolListQuery,
    page: toolPage,
    list: (actor, query) => listTools(parts, actor, query),
    get: (actor, id) => getTool(parts, actor, id),
    make: (actor, request) => createTool(parts, actor, request),
    change: (actor, id, version, request) => updateTool(parts, actor, id, version, request),
  });
  return routes;
}
