// Package change carries a contact plan from one problem to the next and says how two
// plans differ.
//
// Carry puts the plan in force into a new problem, whose windows have moved with new
// elements, or some of which an outage has closed: what is over, under way or fixed is
// held, the rest becomes the plan in force, of which every change has a price
// (Weights.Change). Compare lists the differences between two plans for a person.
package change
