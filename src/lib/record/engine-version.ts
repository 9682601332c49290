/** Version of the arithmetic. It changes whenever the same request could give other digits. */
export const engineVersion = '1.0.0';
