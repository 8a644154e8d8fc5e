// Package rateplan decides which mode a spacecraft sends in when, along a pass.
//
// It works on plain columns, seconds and C/N0 (a Track), and on a list of modes, each
// with the C/N0 that it needs, margins included. Between two samples a mode closes
// where it closes at both of them; that is the only approximation. A Planner finds the
// schedule that brings down the most bits under Rules: so many changes, a least stay,
// a time to lock again, guards in decibels and in time, silence or loss where nothing
// closes. The answer is the optimum over all schedules that change at samples, by
// dynamic programming; the tests compare it with an exhaustive search.
//
// Beside it stand the best fixed mode of a pass, the best one for several passes
// (Planner.Fixed, Planner.Common), the best symbol rate and coding together (Family), and
// two bounds: free switching among the modes, and Shannon's limit.
//
// Rates are net: what is left for the user after sync markers and headers. Bytes are
// bits over 8. Left out: the error rate that the threshold leaves, and fading within a
// pass.
package rateplan
