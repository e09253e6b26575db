// Package control says in which state the movable systems of each opening
// stand at every step of the year.
//
// A Unit is one system with its states, from the most open to the most closed,
// and the law that chooses among them. Laws that need nothing but the sun and
// the clock are settled by New. Where glare is to decide, what an eye sees
// depends on the states themselves, and each Combination of states must be
// looked at as a whole, since glare does not add up. So a Plan asks in rounds:
// Needs lists the combinations that are wanted, Learn takes what was seen in
// them, until nothing is needed. Within a step units only ever close further:
// no state comes back, and a step passes through at most one more combination
// than there are states into which glare can close.
//
// Steps are parts of the year of equal or unequal length; hours are counted by
// their Share. Days are apart from each other wherever glare decides: each
// morning starts as the unit's own law has it.
package control
