import { exp, log2 } from "./elementary";
import { uniform } from "./random";

let logFactorials: usize = 0;
let known: f64 = 0;

/** Takes up the table of ln n! for n below `length`. */
export function takeLogFactorials(table: usize, length: i32): void {
  logFactorials = table;
  known = <f64>length;
}

// @ts-ignore: decorator
@inline
function logFactorial(n: f64): f64 {
  if (n < known) return load<f64>(logFactorials + (<usize>(<i32>n) << 3));
  return logFactorialOfMany(n);
}

function logFactorialOfMany(n: f64): f64 {
  const inverse = 1 / n;
  const log = log2(n) * 0.6931471805599453;
  return (n + 0.5) * log - n + 0.9189385332046728 + inverse * (0.08333333333333333 - (inverse * inverse) / 360);
}

/** How many of `drawn` balls are marked; see ../hypergeometric.ts. */
export function hypergeometric(whole: f64, marked: f64, drawn: f64): f64 {
  const unmarked = whole - marked;
  const least = max<f64>(0, drawn - unmarked);
  const most = min<f64>(marked, drawn);
  if (least == most) return least;
  const mode = floor<f64>(((marked + 1) * (drawn + 1)) / (whole + 2));
  const atMode = exp(
    logFactorial(marked) +
      logFactorial(unmarked) +
      logFactorial(drawn) +
      logFactorial(whole - drawn) -
      logFactorial(whole) -
      logFactorial(mode) -
      logFactorial(marked - mode) -
      logFactorial(drawn - mode) -
      logFactorial(unmarked - drawn + mode),
  );
  let rest = uniform() - atMode;
  if (rest < 0) return mode;
  let up = mode;
  let down = mode;
  let probabilityUp = atMode;
  let probabilityDown = atMode;
  while (up < most || down > least) {
    if (up < most) {
      probabilityUp *= ((marked - up) * (drawn - up)) / ((up + 1) * (unmarked - drawn + up + 1));
      up += 1;
      rest -= probabilityUp;
      if (rest < 0) return up;
    }
    if (down > least) {
      probabilityDown *= (down * (unmarked - drawn + down)) / ((marked - down + 1) * (drawn - down + 1));
      down -= 1;
      rest -= probabilityDown;
      if (rest < 0) return down;
    }
  }
  return mode;
}
