import { verifyRegister } from '$lib/server/log/verify';
import { projectors } from '$lib/server/projectors';
import { rootOf } from '$lib/chain/merkle';
import { entryTexts, replay } from '$lib/server/log/replay';
import { verifierText } from '$lib/chain/verifier-key';
import fc from 'fast-check';
import { join } from 'node:path';
import { expect, test } from 'vitest';
import { testRegister, type TestRegister } from '../../support/register';
import { enter, enterIn, registered } from './history';

/** One step of a random history: always something the projectors can take. */
type Step =
	| { readonly kind: 'register'; readonly uses: readonly string[] }
	| { readonly kind: 'edit'; readonly model: number; readonly name: string; readonly uses: readonly string[] }
	| { readonly kind: 'tier'; readonly model: number; readonly tier: number }
	| { readonly kind: 'signs'; readonly model: number; readonly low: number; readonly high: number }
	| { readonly kind: 'fail'; readonly model: number }
	| { readonly kind: 'sign' };

const uses = fc.uniqueArray(fc.constantFrom('IFRS 9', 'ICAAP', 'Stress test', 'Pricing'), { maxLength: 4 });
const name = fc
	.string({ unit: 'grapheme', minLength: 1, maxLength: 20 })
	.map((text) => `x${text}`.normalize('NFC'));
const finite = fc.double({ noNaN: true, noDefaultInfinity: true, min: -1e6, max: 1e6 });
const model = fc.nat();
const step: fc.Arbitrary<Step> = fc.oneof(
	fc.record({ kind: fc.constant('register' as const), uses }),
	fc.record({ kind: fc.constant('edit' as const), model, name, uses }),
	fc.record({ kind: fc.constant('tier' as const), model, tier: fc.integer({ min: 1, max: 3 }) }),
	fc.record({ kind: fc.constant('signs' as const), model, low: finite, high: finite }),
	fc.record({ kind: fc.constant('fail' as const), model }),
	fc.record({ kind: fc.constant('sign' as const) })
);

/** Plays the steps; returns how many entries they leave. */
const play = (register: TestRegister, steps: readonly Step[]): number => {
	let models = 0;
	let declared = 0;
	let entries = 0;
	const ref = (k: number): string => `M-${String((k % models) + 1).padStart(3, '0')}`;
	for (const one of steps) {
		if (one.kind === 'sign') {
			register.ctx.log.signCheckpoint();
			continue;
		}
		if (one.kind === 'register') {
			models++;
			registered(register, ref(models - 1), one.uses);
			entries++;
			continue;
		}
		if (models === 0) continue;
		const of = ref(one.model);
		if (one.kind === 'fail') {
			expect(() => givenUp(register, of)).toThrow('given up');
			continue;
		}
		entries++;
		if (one.kind === 'edit')
			enter(register, 'model.edited', [of], { model: of, name: one.name, uses: [...one.uses] });
		if (one.kind === 'tier')
			enter(register, 'tier.confirmed', [of], { model: of, tier: one.tier, proposed: 1 });
		if (one.kind === 'signs') {
			const driver = { series: 'income', sign: 'any' as const, low: one.low, high: one.high, rationale: 'r' };
			const n = ++declared;
			enter(register, 'prior.declared', [of], {
				model: of,
				n,
				side: 'owner',
				late: false,
				drivers: [driver]
			});
		}
	}
	return entries;
};

/** Two entries and their rows, then a fault before COMMIT: nothing of it may remain. */
const givenUp = (register: TestRegister, model: string): void =>
	register.ctx.write((tx) => {
		enterIn(register, tx, 'tier.confirmed', [model], { model, tier: 3, proposed: 1 });
		enterIn(register, tx, 'model.edited', [model], { model, name: 'never' });
		throw new Error('given up');
	});

test('random histories replay to identical tables and verify', async () => {
	await fc.assert(
		fc.asyncProperty(fc.array(step, { minLength: 1, maxLength: 40 }), async (steps) => {
			const register = await testRegister();
			try {
				const entries = play(register, steps);
				const { log, read } = register.ctx;
				expect(log.frontier().size).toBe(entries + 1);
				const again = await replay(entryTexts(read), projectors);
				expect(rootOf(again.frontier).equals(rootOf(log.frontier()))).toBe(true);
				again.close();
				const report = await verifyRegister({
					file: join(register.folder, 'keelbook.db'),
					key: verifierText(log.verifier),
					projectors
				});
				expect(report.faults).toEqual([]);
				expect(report.notChecked).toEqual([]);
			} finally {
				register.close();
			}
		}),
		{ numRuns: 40 }
	);
});
