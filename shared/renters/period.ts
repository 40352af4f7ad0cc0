/** From this many days on, first and last included, a rental needs an individual test. */
export const individualTestFromDays = 15
