import { describe, expect, it } from 'vitest';
import { recogniseColumns } from '../../src/accounts/columns.ts';
import { layoutOf } from '../../src/accounts/layout.ts';

/** Headers written by hand after the many ways in which billing systems and spreadsheets name things; the values tell dates from names. */
const HEADERS: readonly (readonly [string, Partial<Record<'id' | 'start' | 'end' | 'segment' | 'amount', string>>])[] =
  [
    [
      'account_id,plan,start_date,end_date,mrr',
      { id: 'account_id', start: 'start_date', end: 'end_date', segment: 'plan', amount: 'mrr' },
    ],
    [
      'CustomerID,SignupDate,CancelDate,Tier,Amount',
      { id: 'CustomerID', start: 'SignupDate', end: 'CancelDate', segment: 'Tier', amount: 'Amount' },
    ],
    [
      'Customer Id,Created At,Canceled At,Product,Price',
      { id: 'Customer Id', start: 'Created At', end: 'Canceled At', segment: 'Product', amount: 'Price' },
    ],
    [
      'subscriber,joined,left,region,value',
      { id: 'subscriber', start: 'joined', end: 'left', segment: 'region', amount: 'value' },
    ],
    [
      'Member Number,Member Since,Expired On,Membership Level,Fee',
      { id: 'Member Number', start: 'Member Since', end: 'Expired On', segment: 'Membership Level', amount: 'Fee' },
    ],
    [
      'clientId,activatedOn,terminatedOn,channel,revenue',
      { id: 'clientId', start: 'activatedOn', end: 'terminatedOn', segment: 'channel', amount: 'revenue' },
    ],
    [
      'id,subscriptionStart,subscriptionEnd,plan_name,monthly_amount',
      { id: 'id', start: 'subscriptionStart', end: 'subscriptionEnd', segment: 'plan_name', amount: 'monthly_amount' },
    ],
    [
      'user_id,first_paid_at,churned_at,segment,arr',
      { id: 'user_id', start: 'first_paid_at', end: 'churned_at', segment: 'segment', amount: 'arr' },
    ],
    [
      'Company,Valid From,Valid Until,Package,Contract Value',
      { id: 'Company', start: 'Valid From', end: 'Valid Until', segment: 'Package', amount: 'Contract Value' },
    ],
    [
      'email,registered,closed_date,country,total',
      { id: 'email', start: 'registered', end: 'closed_date', segment: 'country', amount: 'total' },
    ],
    [
      'Kundennummer,Vertragsbeginn,Vertragsende,Tarif,Betrag',
      { id: 'Kundennummer', start: 'Vertragsbeginn', end: 'Vertragsende', segment: 'Tarif', amount: 'Betrag' },
    ],
  ];

const rows = Array.from(
  { length: 12 },
  (_, at) => `k-${at},2024-01-${10 + at},${at % 3 === 0 ? '2024-05-01' : ''},A,${20 + at}.5`,
);

describe('recogniseColumns', () => {
  it.each(HEADERS)('%s', (header, expected) => {
    const names = header.split(',');
    // Values stand in the order id, start, end, segment, amount; put them under the header that is meant.
    const roles = ['id', 'start', 'end', 'segment', 'amount'] as const;
    const order = names.map((name) => roles.findIndex((role) => expected[role] === name));
    const body = rows.map((row) => order.map((at) => row.split(',')[at]).join(',')).join('\n');
    const columns = recogniseColumns(layoutOf(`${header}\n${body}`));
    expect(Object.fromEntries(roles.map((role) => [role, names[columns[role] ?? -1]]))).toEqual(expected);
  });

  it('the trial, the next bill and the last login are not taken for start and end', () => {
    const header =
      'id,trial_start,trial_end,start_date,current_period_start,current_period_end,cancelled_at,last_login,updated_at';
    const body = rows
      .map(
        (_, at) =>
          `k${at},2024-01-01,2024-01-14,2024-01-15,2024-05-01,2024-06-01,${at % 2 ? '2024-05-09' : ''},2024-05-02,2024-05-03`,
      )
      .join('\n');
    const columns = recogniseColumns(layoutOf(`${header}\n${body}`));
    expect([header.split(',')[columns.start], header.split(',')[columns.end]]).toEqual(['start_date', 'cancelled_at']);
  });

  it('a start column must hold dates: a number called "start" gives way', () => {
    const body = rows.map((_, at) => `k${at},${at},2024-01-15,2024-05-01`).join('\n');
    const columns = recogniseColumns(layoutOf(`id,start_mileage,signup,end\n${body}`));
    expect(columns.start).toBe(2);
  });

  it('the columns that were named win', () => {
    const body = rows.map((_, at) => `k${at},2024-01-15,2024-01-16,2024-05-01`).join('\n');
    expect(recogniseColumns(layoutOf(`id,start,signup,end\n${body}`), { start: 'Signup' }).start).toBe(2);
  });
});
