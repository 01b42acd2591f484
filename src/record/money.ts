/** Decimal places of a currency (ISO 4217): two for pounds, none for yen. */
export const currencyPlaces = (currency: string): number =>
  new Intl.NumberFormat('en', { style: 'currency', currency }).resolvedOptions().maximumFractionDigits ?? 2;
