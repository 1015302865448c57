import type { Ctx } from '../context';
import { seatActor, seedSeat } from '../people/seats';
import { models, seats, type Seat } from './bank';
import type { Stage } from './stage';
import { extend, tell, type Told } from './story';

/** Makes the demo bank: seats, models, data, versions and runs, each at its own date before today. */
export const seedDemo = async (ctx: Ctx, stage: Stage): Promise<void> => {
	const persons = new Map(
		Object.entries(seats).map(([seat, { name, roles }]) => [seat, seedSeat(ctx, { name, roles })])
	);
	const as = (seat: Seat) => seatActor(ctx, persons.get(seat)!);
	const teller = { ctx, stage, as };
	const told: Told[] = [];
	for (const model of [...models].sort((a, b) => b.registered - a.registered)) {
		stage.at(model.registered);
		told.push(await tell(teller, model));
	}
	stage.at(0);
	stage.pass(0);
	for (const one of told) if (one.model.second) await extend(teller, one);
};
