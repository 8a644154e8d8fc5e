// Package drawing draws the charts of reports without a browser and without a script: lines
// over time or over another quantity, the track on the sky, a round map, antennas over time as strips,
// and the overview of a window. Words keep off each other where they can. It
// takes finished numbers in the units that are shown, lays axes, labels and legend out by the
// advances of a font, and draws onto a Canvas: SVG here, paper in reports/paper. All lengths
// are points of 1/72 inch, x to the right and y down.
//
// The chart script of the pages was measured in a JavaScript engine in Go at 0.3 s to compile
// and 0.1 to 0.5 s a chart; a report of two dozen passes has two hundred charts, so that the
// static ones have a painter of their own, which needs no script.
package drawing
