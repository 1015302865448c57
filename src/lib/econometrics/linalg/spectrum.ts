import { EigenvalueDecomposition, Matrix, SingularValueDecomposition } from 'ml-matrix';

/** The only door to ml-matrix: singular values and symmetric eigenvalues. */

function toMatrix(a: Float64Array, rows: number, cols: number): Matrix {
	const m = Matrix.zeros(rows, cols);
	for (let j = 0; j < cols; j++) for (let i = 0; i < rows; i++) m.set(i, j, a[j * rows + i]!);
	return m;
}

/** Singular values, largest first, of a column-major rows x cols matrix. */
export function singularValues(a: Float64Array, rows: number, cols: number): readonly number[] {
	return new SingularValueDecomposition(toMatrix(a, rows, cols), {
		computeLeftSingularVectors: false,
		computeRightSingularVectors: false,
		autoTranspose: true
	}).diagonal;
}

/** Eigenvalues, ascending, of a symmetric column-major n x n matrix. */
export function symmetricEigenvalues(a: Float64Array, n: number): readonly number[] {
	const values = new EigenvalueDecomposition(toMatrix(a, n, n), { assumeSymmetric: true }).realEigenvalues;
	return [...values].sort((x, y) => x - y);
}
