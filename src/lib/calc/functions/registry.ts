import type { CalcFunction } from './function';
import { abs } from './abs';
import { acos } from './acos';
import { acosh } from './acosh';
import { asin } from './asin';
import { asinh } from './asinh';
import { atan } from './atan';
import { atan2 } from './atan2';
import { atanh } from './atanh';
import { cbrt } from './cbrt';
import { ceil } from './ceil';
import { code } from './code';
import { cos } from './cos';
import { cosh } from './cosh';
import { count } from './count';
import { cube } from './cube';
import { divider } from './divider';
import { exp } from './exp';
import { expm1 } from './expm1';
import { fix } from './fix';
import { floor } from './floor';
import { hypot } from './hypot';
import { log } from './log';
import { log10 } from './log10';
import { log1p } from './log1p';
import { log2 } from './log2';
import { lsb } from './lsb';
import { max } from './max';
import { mean } from './mean';
import { median } from './median';
import { min } from './min';
import { mod } from './mod';
import { number } from './number';
import { parallel } from './parallel';
import { preferred } from './preferred';
import { preferredAbove } from './preferred-above';
import { preferredBelow } from './preferred-below';
import { prod } from './prod';
import { round } from './round';
import { sign } from './sign';
import { sin } from './sin';
import { sinh } from './sinh';
import { sqrt } from './sqrt';
import { square } from './square';
import { std } from './std';
import { sum } from './sum';
import { tan } from './tan';
import { tanh } from './tanh';
import { variance } from './variance';
import { bands } from './bands';
import { bandsValue } from './bands-value';
import { dB } from './db';
import { dBm } from './db-m';
import { dBV } from './db-v';
import { findDivider } from './find-divider';
import { findPart } from './find-part';
import { fromdB } from './from-db';
import { interpolate } from './interpolate';
import { johnson } from './johnson';
import { ntcBeta } from './ntc-beta';
import { ntcBetaTemperature } from './ntc-beta-temperature';
import { polynomial } from './polynomial';
import { pt } from './pt';
import { ptTemperature } from './pt-temperature';
import { rkm } from './rkm';
import { rkmText } from './rkm-text';
import { rkmTextC } from './rkm-text-c';
import { settling } from './settling';
import { steinhart } from './steinhart';
import { steinhartResistance } from './steinhart-resistance';
import { thermocouple } from './thermocouple';
import { thermocoupleTemperature } from './thermocouple-temperature';
import { normal } from './normal';
import { rectangular } from './rectangular';
import { tolerance } from './tolerance';
import { triangular } from './triangular';
import { arcsine } from './arcsine';
import { trapezoidal } from './trapezoidal';
import { inexactRectangular } from './inexact-rectangular';
import { student } from './student';
import { repeated } from './repeated';
import { quantisation } from './quantisation';
import { value } from './value';
import { uncertainty } from './uncertainty';
import { lower } from './lower';
import { upper } from './upper';
import { correlated } from './correlated';
import { dof } from './dof';

const all: CalcFunction[] = [
	normal,
	rectangular,
	tolerance,
	triangular,
	arcsine,
	trapezoidal,
	inexactRectangular,
	student,
	repeated,
	quantisation,
	value,
	uncertainty,
	lower,
	upper,
	correlated,
	dof,
	abs,
	acos,
	acosh,
	asin,
	asinh,
	atan,
	atan2,
	atanh,
	cbrt,
	ceil,
	code,
	cos,
	cosh,
	count,
	cube,
	divider,
	exp,
	expm1,
	fix,
	floor,
	hypot,
	log,
	log10,
	log1p,
	log2,
	lsb,
	max,
	mean,
	median,
	min,
	mod,
	number,
	parallel,
	preferred,
	preferredAbove,
	preferredBelow,
	prod,
	round,
	sign,
	sin,
	sinh,
	sqrt,
	square,
	std,
	sum,
	tan,
	tanh,
	variance,
	bands,
	bandsValue,
	dB,
	dBm,
	dBV,
	findDivider,
	findPart,
	fromdB,
	interpolate,
	johnson,
	ntcBeta,
	ntcBetaTemperature,
	polynomial,
	pt,
	ptTemperature,
	rkm,
	rkmText,
	rkmTextC,
	settling,
	steinhart,
	steinhartResistance,
	thermocouple,
	thermocoupleTemperature,
];

/** The functions of the language by name. What is not here cannot be called. */
export const functions: ReadonlyMap<string, CalcFunction> = new Map(all.map((fn) => [fn.name, fn]));
