import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';

/** The folder that holds package.json, notebooks/ and kernel-lib/. */
export const root = dirname(dirname(dirname(fileURLToPath(import.meta.url))));

/** Path below the project's folder. */
export const inRoot = (...parts) => join(root, ...parts);
