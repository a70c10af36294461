"""The JavaScript functions that the operations' script templates call.

A number that is not known is `NaN`, a flag or text that is not known `null`, a date its ordinal day.
Doubles only: what this gives is for looking at while a field changes, and is never a verdict.
"""

from __future__ import annotations

SCRIPT_LIBRARY = r"""
"use strict";
const divide = (a, b) => (b === 0 ? NaN : a / b);
const power = (a, b) => { const r = a === 0 && b < 0 ? NaN : Math.pow(a, b); return Number.isFinite(r) ? r : NaN; };
const logarithm = (a) => (a > 0 ? Math.log(a) : NaN);
const direction = (y, x) => (y === 0 && x === 0 ? NaN : Math.atan2(y, x));
const nearest = (a) => Math.trunc(a + (a < 0 ? -0.5 : 0.5));
const nearest_even = (a) => {
  const low = Math.floor(a), rest = a - low;
  return rest > 0.5 || (rest === 0.5 && low % 2 !== 0) ? low + 1 : low;
};
const steps = (way, a, step) => (step > 0 ? step * way(a / step) : NaN);

const total = (...numbers) => numbers.reduce((sum, number) => sum + number, 0);
const minimum = (...numbers) => numbers.reduce((a, b) => Math.min(a, b));
const maximum = (...numbers) => numbers.reduce((a, b) => Math.max(a, b));

const kept = (pairs) => {
  const numbers = [];
  for (let i = 0; i < pairs.length; i += 2) {
    if (pairs[i] === null) return null;
    if (pairs[i]) numbers.push(pairs[i + 1]);
  }
  return numbers;
};
const on_kept = (least, rule) => (...pairs) => {
  const numbers = kept(pairs);
  return numbers === null || numbers.length < least ? NaN : rule(numbers);
};
const total_where = on_kept(0, (numbers) => total(...numbers));
const mean_of = (numbers) => total(...numbers) / numbers.length;
const mean_where = on_kept(1, mean_of);
const deviation_where = on_kept(2, (numbers) => {
  const mean = mean_of(numbers);
  return Math.sqrt(total(...numbers.map((number) => (number - mean) ** 2)) / (numbers.length - 1));
});
const least_where = on_kept(1, (numbers) => minimum(...numbers));
const greatest_where = on_kept(1, (numbers) => maximum(...numbers));
const count_where = (...flags) => (flags.includes(null) ? NaN : flags.filter((flag) => flag).length);

const known = (a, b, holds) => (Number.isNaN(a) || Number.isNaN(b) ? null : holds);
const at_most = (a, b) => known(a, b, a <= b);
const below = (a, b) => known(a, b, a < b);
const equal = (a, b) => known(a, b, a === b);
const same_text = (a, b) => (a === null || b === null ? null : a === b);
const both = (...flags) => (flags.includes(false) ? false : flags.includes(null) ? null : true);
const either = (...flags) => (flags.includes(true) ? true : flags.includes(null) ? null : false);
const negation = (flag) => (flag === null ? null : !flag);

const day_of_1970 = 719163;
const in_calendar = (day) => (Number.isInteger(day) && day >= 1 && day <= 3652059 ? day : NaN);
const to_parts = (day) => {
  const date = new Date((day - day_of_1970) * 86400000);
  return [date.getUTCFullYear(), date.getUTCMonth(), date.getUTCDate()];
};
const from_parts = (year, month, date) => {
  const moment = new Date(0);
  moment.setUTCFullYear(year, month, date);
  return in_calendar(moment.getTime() / 86400000 + day_of_1970);
};
const ordinal = (day) => in_calendar(day);
const add_days = (day, days) => in_calendar(in_calendar(day) + days);
const add_months = (day, months) => {
  if (Number.isNaN(in_calendar(day)) || !Number.isInteger(months)) return NaN;
  const [year, month, date] = to_parts(day);
  const last = to_parts(from_parts(year, month + months + 1, 0))[2];
  return from_parts(year, month + months, Math.min(date, last));
};
const end_of_year = (day) => (Number.isNaN(in_calendar(day)) ? NaN : from_parts(to_parts(day)[0], 11, 31));
const years_between = (start, end) => {
  if (Number.isNaN(in_calendar(start)) || Number.isNaN(in_calendar(end))) return NaN;
  if (end < start) return -years_between(end, start);
  const years = to_parts(end)[0] - to_parts(start)[0];
  return years === 0 || add_months(start, 12 * years) <= end ? years : years - 1;
};
"""
