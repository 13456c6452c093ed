/*
 * The nouns of survival.
 *
 * time       age of an account, in any unit (days or months of tenure)
 * lost       accounts whose time as a customer ended at exactly this age
 * censored   accounts last seen still there at this age: what happens later is not known
 * at risk    accounts still there, and still observed, just before this age
 * hazard     lost / at risk: the chance of leaving at this age, for those who got that far
 * survival   share still there after this age
 */

/** How many accounts were lost, and how many last seen, at one age. Whole numbers. */
export interface Departures {
  readonly time: number;
  readonly lost: number;
  readonly censored: number;
}

/** Accounts at risk at one age, and those lost at it: 0 <= lost <= atRisk. */
export interface RiskSet {
  readonly time: number;
  readonly atRisk: number;
  readonly lost: number;
}
