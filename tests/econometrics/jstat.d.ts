declare module 'jstat' {
	interface Distribution<Parameters extends number[]> {
		cdf(x: number, ...parameters: Parameters): number;
		inv(p: number, ...parameters: Parameters): number;
	}
	const jstat: {
		readonly jStat: {
			readonly normal: Distribution<[mean: number, sd: number]>;
			readonly studentt: Distribution<[df: number]>;
			readonly chisquare: Distribution<[df: number]>;
			readonly centralF: Distribution<[df1: number, df2: number]>;
		};
	};
	export default jstat;
}
