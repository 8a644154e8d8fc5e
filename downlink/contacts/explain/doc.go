// Package explain says of a contact plan why it is as it is: for each window that it
// leaves, what took its place or which rule forbids it and what taking it would cost; for
// each limit that binds, what more of it would be worth.
//
// Costs and worths come from plans that the solver made and the checker judged. A cost is
// at most what is said, since a better way to take the window may exist; a worth is at
// least what is said, since a better use of the greater limit may exist, and at most what
// the bound leaves.
package explain
