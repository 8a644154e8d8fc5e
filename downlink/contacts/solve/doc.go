// Package solve finds a contact plan and proves how far it can be from the best one.
//
// Two sides work in rounds. One makes plans: a greedy plan at once, then neighbourhood
// search that empties a part of the plan and fills it again, antenna by antenna or
// spacecraft by spacecraft, each of these chains by dynamic programming. The other makes
// the bound: what couples the antennas (a spacecraft at two stations, what a request
// desires, limits by day, a budget, shared chains, recorders) is given a price, so that
// each antenna alone remains, a chain that dynamic programming solves exactly. Every set
// of prices gives an upper bound on every plan (Lagrangian relaxation; A. M. Geoffrion,
// Mathematical Programming Study 2, 1974, from memory); subgradient steps look for the
// prices that give the least (B. T. Polyak 1969, from memory).
//
// A problem of at most some hundred windows is then divided: a contact covers an instant
// or not, a window is used or not, until the bound of each part is no better than the
// best plan (branch and bound). What the prices leave out is then decided, too, so that
// the optimum is proven for small problems with every rule.
//
// The bound holds for contacts at any instant, not only at whole steps, as long as times
// of the problem are multiples of the grid on which chains are solved; where a finer
// grid would be too large, every rounding is in favour of the bound. Rules that
// have no price (slews, hand-overs, commands, clashes, times between contacts) are left
// out of the bound, which is then looser but stays true.
//
// For a number of rounds the answer is the same on every machine and for every number of
// workers. The package does not read the clock: the context ends the search.
package solve
