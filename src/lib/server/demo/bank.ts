import type { Role } from '$lib/domain/actor';
import type { SeasonalAdjustment } from '$lib/domain/lineage';
import type { Sign, Specification, TransformStep } from '$lib/domain/specification';
import {
	businessDefaults,
	householdDeposits,
	insolvencyLosses,
	mortgageArrears,
	retailLosses,
	type InventedSource
} from './series';

/** The people of the demo bank: all invented. */
export const seats = {
	ansa: { name: 'Ansa Verholt', roles: ['owner'] },
	miro: { name: 'Miro Taskin', roles: ['owner'] },
	ines: { name: 'Ines Corrada', roles: ['validator'] },
	lev: { name: 'Lev Ostrand', roles: ['validator'] },
	greta: { name: 'Greta Lindahl-Mora', roles: ['head'] },
	piet: { name: 'Piet Amarel', roles: ['auditor'] },
	noor: { name: 'Noor Selwyn', roles: ['admin'] },
	jonas: { name: 'Jonas Weirich', roles: ['admin'] }
} as const satisfies Record<string, { name: string; roles: readonly Role[] }>;

export type Seat = keyof typeof seats;

/** What the owner says of one column of a data file. */
interface Lineage {
	readonly column: string;
	readonly unit: string;
	readonly source: string;
	readonly code: string;
	readonly seasonal: SeasonalAdjustment;
	readonly transform: readonly TransformStep[];
}

interface Driver {
	readonly series: string;
	readonly sign: Sign;
	readonly plausible: readonly [number, number];
	readonly rationale: string;
}

/** One model of the demo bank and its story. */
export interface DemoModel {
	readonly name: string;
	readonly purpose: string;
	readonly portfolio: string;
	readonly uses: readonly string[];
	readonly owner: Seat;
	readonly validator: Seat;
	readonly materiality: number;
	readonly complexity: number;
	/** Months before today at which the model was registered. */
	readonly registered: number;
	readonly source: InventedSource;
	readonly dataset: string;
	readonly lineage: readonly [Lineage, ...Lineage[]];
	readonly drivers: readonly Driver[];
	readonly ownLags: readonly number[];
	readonly estimator: 'one-step' | 'two-step';
	/** Factor put on the claimed coefficients: 1 claims what the data say. */
	readonly claimed: number;
	/** Whether the owner stored a second vintage lately. */
	readonly second?: true;
}

const rate = (column: string, source: string, code: string): Lineage => ({
	column,
	unit: 'per cent',
	source,
	code,
	seasonal: 'unadjusted',
	transform: []
});

const bank = 'Bank ledger, credit losses (invented)';
const statistics = 'Office of statistics (invented)';

export const models: readonly DemoModel[] = [
	{
		name: 'Loss rate on unsecured retail lending',
		purpose:
			'Projects the yearly loss rate on instalment loans and overdrafts under the scenarios of the capital stress test.',
		portfolio: 'Unsecured retail lending',
		uses: ['capital stress', 'provisioning'],
		owner: 'ansa',
		validator: 'ines',
		materiality: 4,
		complexity: 2,
		registered: 8,
		source: retailLosses,
		dataset: 'Retail losses and unemployment',
		lineage: [
			rate('loss_rate', bank, 'CRL.RET.UNS.A'),
			{ ...rate('unemployment', statistics, 'LFS.UNR.T'), seasonal: 'adjusted' }
		],
		drivers: [
			{
				series: 'unemployment',
				sign: '+',
				plausible: [0.2, 0.9],
				rationale: 'Loss of wage income is the main reason why instalment loans stop being paid.'
			}
		],
		ownLags: [1],
		estimator: 'one-step',
		claimed: 1,
		second: true
	},
	{
		name: 'Default rate, small businesses',
		purpose:
			'Projects the default rate of businesses below two million in turnover for the capital stress test.',
		portfolio: 'Small-business lending',
		uses: ['capital stress'],
		owner: 'miro',
		validator: 'ines',
		materiality: 3,
		complexity: 3,
		registered: 7,
		source: businessDefaults,
		dataset: 'Small-business defaults and debt service',
		lineage: [
			rate('default_rate', bank, 'DEF.SMB.Q'),
			{ ...rate('debt_service', statistics, 'NFC.DSR.S'), unit: 'per cent of income' }
		],
		drivers: [
			{
				series: 'debt_service',
				sign: '+',
				plausible: [0.1, 0.6],
				rationale:
					'Interest and repayment fall due before wages and suppliers; a heavier burden ends in default.'
			}
		],
		ownLags: [1],
		estimator: 'one-step',
		claimed: 1
	},
	{
		name: 'Mortgage arrears, over 90 days',
		purpose:
			'Projects the share of mortgages more than 90 days in arrears for provisioning and the yearly plan.',
		portfolio: 'Residential mortgages',
		uses: ['provisioning', 'plan'],
		owner: 'miro',
		validator: 'lev',
		materiality: 4,
		complexity: 2,
		registered: 14,
		source: mortgageArrears,
		dataset: 'Mortgage arrears, unemployment and mortgage rate',
		lineage: [
			rate('arrears', bank, 'ARR.MTG.90'),
			{ ...rate('unemployment', statistics, 'LFS.UNR.T'), seasonal: 'adjusted' },
			rate('mortgage_rate', 'Central bank (invented)', 'MIR.MTG.NEW')
		],
		drivers: [
			{
				series: 'unemployment',
				sign: '+',
				plausible: [0.1, 0.6],
				rationale: 'Households that lose a wage fall behind with a lag of some quarters.'
			},
			{
				series: 'mortgage_rate',
				sign: '+',
				plausible: [0, 0.6],
				rationale: 'Most loans are refixed within five years; a higher rate raises the instalment.'
			}
		],
		ownLags: [1],
		estimator: 'one-step',
		claimed: 1
	},
	{
		name: 'Deposit volume, households',
		purpose: 'Projects household deposits for the liquidity plan.',
		portfolio: 'Household deposits',
		uses: ['liquidity plan'],
		owner: 'ansa',
		validator: 'lev',
		materiality: 2,
		complexity: 2,
		registered: 5,
		source: householdDeposits,
		dataset: 'Household deposits, income and deposit spread',
		lineage: [
			{
				column: 'deposits',
				unit: 'thousand million',
				source: bank,
				code: 'DEP.HH.OUT',
				seasonal: 'unadjusted',
				transform: [{ step: 'log' }]
			},
			{
				column: 'income',
				unit: 'thousand million a year',
				source: statistics,
				code: 'NA.HH.DI',
				seasonal: 'adjusted',
				transform: [{ step: 'log' }]
			},
			{ ...rate('deposit_spread', bank, 'TRY.SPR.HH'), unit: 'percentage points' }
		],
		drivers: [
			{
				series: 'income',
				sign: '+',
				plausible: [0.8, 1.5],
				rationale: 'Deposits grow with what households earn, a little faster as wealth accumulates.'
			},
			{
				series: 'deposit_spread',
				sign: '+',
				plausible: [0, 0.2],
				rationale: 'A better rate than the market keeps money in the bank.'
			}
		],
		ownLags: [1],
		estimator: 'two-step',
		claimed: 1.06
	},
	{
		name: 'Insolvency losses, large corporates',
		purpose: 'Gives the yearly insolvency loss of large corporates for the long-horizon plan.',
		portfolio: 'Large corporates',
		uses: ['plan'],
		owner: 'ansa',
		validator: 'ines',
		materiality: 2,
		complexity: 1,
		registered: 3,
		source: insolvencyLosses,
		dataset: 'Corporate insolvency losses, yearly',
		lineage: [
			rate('insolvency_loss', bank, 'INS.LC.A'),
			{ ...rate('interest_burden', statistics, 'NFC.INT.A'), unit: 'per cent of operating surplus' }
		],
		drivers: [
			{
				series: 'interest_burden',
				sign: '+',
				plausible: [0.02, 0.12],
				rationale: 'Interest is paid out of operating surplus; what it takes is missing for everything else.'
			}
		],
		ownLags: [],
		estimator: 'one-step',
		claimed: 1
	}
];

/** The specification of a demo model over a sample, without claims. */
export const specificationOf = (model: DemoModel, from: string, to: string): Specification => {
	const [dependent] = model.lineage;
	return {
		schema: 1,
		frequency: model.source.frequency,
		series: model.lineage.map(({ column, unit, transform }) => ({
			name: column,
			column,
			unit,
			transform: [...transform]
		})),
		dependent: dependent.column,
		longRun: {
			drivers: model.drivers.map((driver) => ({ ...driver, plausible: [...driver.plausible] })),
			constant: true,
			trend: false
		},
		shortRun: {
			own: [...model.ownLags],
			drivers: model.drivers.map(({ series, sign }) => ({ series, lags: [0], sign })),
			constant: model.estimator === 'one-step' ? false : true
		},
		dummies: [],
		fixed: [],
		sample: { from, to },
		estimator: { kind: model.estimator },
		standardErrors: 'ols'
	};
};
