import type { ApiRoutes } from './http/api-routes.ts';
import type { Parts } from './http/parts.ts';

/** Every resource below `/api/v1`. A new one adds its factory here and nothing else: mounting and documenting follow. */
export const RESOURCES: readonly ((parts: Parts) => ApiRoutes)[] = [];
