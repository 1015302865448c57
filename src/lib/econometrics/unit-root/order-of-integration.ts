import { refuse, type Refusal } from '../refusal';

/** One test with its critical value at the level that judges. */
export interface JudgedTest {
	readonly test: 'adf' | 'pp' | 'dfgls' | 'kpss';
	readonly stat: number;
	/** At the judging level. */
	readonly critical: number;
}

/** The tests of one series in one form: unit-root tests reject below, stationarity tests above. */
export interface FormTests {
	readonly unitRoot: readonly JudgedTest[];
	readonly stationarity: readonly JudgedTest[];
}

export type Order = 'I(0)' | 'I(1)' | 'I(2)' | 'contradiction';

/** What the tests of level and first difference say together about a series. */
export interface OrderReading {
	readonly order: Order;
	/** Whether each kind of test rejects its null: all of them, none of them, or some (`mixed`). */
	readonly level: FormReading;
	readonly difference: FormReading;
}

export interface FormReading {
	readonly unitRoot: Rejection;
	readonly stationarity: Rejection;
}

type Rejection = 'rejected' | 'not rejected' | 'mixed';

/**
 * Reads unit-root tests (null: unit root) and stationarity tests (null: stationary) of level and difference jointly.
 * I(1): the level keeps its unit root and loses stationarity, the difference the reverse. I(0): the level loses
 * the unit root and keeps stationarity. I(2): the ADF test keeps a unit root in the difference and stationarity
 * of the difference is rejected. Anything else contradicts itself and is left to a person. Refuses `too-short`
 * where one of the four lists is empty.
 */
export function orderOfIntegration(tests: {
	readonly level: FormTests;
	readonly difference: FormTests;
}): OrderReading | Refusal {
	for (const [form, { unitRoot, stationarity }] of Object.entries(tests)) {
		if (unitRoot.length === 0) return refuse('too-short', `no unit-root test of the ${form} could be made`);
		if (stationarity.length === 0)
			return refuse('too-short', `no stationarity test of the ${form} could be made`);
	}
	const level = readForm(tests.level);
	const difference = readForm(tests.difference);
	return Object.freeze({ order: orderFrom(level, difference, tests.difference), level, difference });
}

function orderFrom(level: FormReading, difference: FormReading, differenceTests: FormTests): Order {
	const adfKeepsRoot = differenceTests.unitRoot.some((t) => t.test === 'adf' && t.stat >= t.critical);
	if (adfKeepsRoot && difference.stationarity === 'rejected') return 'I(2)';
	if (level.unitRoot === 'rejected' && level.stationarity === 'not rejected') return 'I(0)';
	const levelWanders = level.unitRoot === 'not rejected' && level.stationarity === 'rejected';
	const changeSettles = difference.unitRoot === 'rejected' && difference.stationarity === 'not rejected';
	return levelWanders && changeSettles ? 'I(1)' : 'contradiction';
}

function readForm(tests: FormTests): FormReading {
	return Object.freeze({
		unitRoot: summarise(tests.unitRoot.map((t) => t.stat < t.critical)),
		stationarity: summarise(tests.stationarity.map((t) => t.stat > t.critical))
	});
}

function summarise(rejections: readonly boolean[]): Rejection {
	if (rejections.every(Boolean)) return 'rejected';
	return rejections.some(Boolean) ? 'mixed' : 'not rejected';
}
