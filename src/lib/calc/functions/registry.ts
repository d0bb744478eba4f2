import type { CalcFunction } from './function';
import { preferred } from './preferred';
import { preferredAbove } from './preferred-above';
import { preferredBelow } from './preferred-below';

const all: CalcFunction[] = [preferred, preferredAbove, preferredBelow];

/** The functions of the language by name. What is not here cannot be called. */
export const functions: ReadonlyMap<string, CalcFunction> = new Map(all.map((fn) => [fn.name, fn]));
