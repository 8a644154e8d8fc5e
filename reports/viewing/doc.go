// Package viewing looks at pages in a headless Chromium, for tests: it opens them on
// screens of a size and a colour scheme, hears what they say and ask for, and measures
// what stands there: width, contrast, headings, names of controls and charts, the way
// of the keyboard, sheets of paper, weight.
//
// No page reaches beyond this machine: every name but the loopback's is unknown to the
// browser. Criteria are those of WCAG 2.1, W3C Recommendation, June 2018, level AA; the
// number of the criterion stands at the measurement, in measure.js.
package viewing
