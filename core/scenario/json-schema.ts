/**
 * The JSON Schema of scenario files, made of the same definition that the loader reads by.
 */
import * as z from 'zod';
import { scenarioDocument } from './document.ts';

/** JSON Schema, draft 2020-12, of what a file may hold. What several keys say together it cannot check; the loader does. */
export function scenarioJsonSchema(): object {
  return z.toJSONSchema(scenarioDocument, { io: 'input', reused: 'ref' });
}
