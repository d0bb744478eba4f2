import { create, parseDependencies, unitDependencies, type FactoryFunctionMap } from 'mathjs';
import { isNameCharacter } from './characters';

/** The engine's own instance: mathjs's grammar and its table of units. Nothing of it evaluates. */
export const mathjs = create({ parseDependencies, unitDependencies } as FactoryFunctionMap, {});

(mathjs.parse as unknown as { isAlpha: (c: string) => boolean }).isAlpha = isNameCharacter;
