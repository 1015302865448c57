/**
 * Version of the computing part: econometrics and battery. It changes whenever a figure, a verdict or a rule of theirs
 * could come out differently, and stands in every run request.
 */
export const engineVersion = '1.0.0';
