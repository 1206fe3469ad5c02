import type { Model } from '../contract.js';
import { standardModel } from './standard-model.js';

/** Every shipped model by name. */
export const models: ReadonlyMap<string, Model> = new Map(
  [standardModel].map((model) => [model.name, model]),
);
