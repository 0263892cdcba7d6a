/** How many decimals a stored number carries, so that none are shown that it does not have. */
export const decimalsOf = (value: number): number => (/e/.test(String(value)) ? 0 : (String(value).split('.')[1] ?? '').length)
