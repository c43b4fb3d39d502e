// Package method writes the paragraph about the method, and the caption, that a
// reviewer asks to see beside a figure or a table, and lists what they still lack.
//
// What reviewers ask for is the union of the figure elements of agencies' guidance on
// groundwater levels and on ground surveys: zone and date, the values used and those
// not used with their reasons, interval, datum and units, how the surface was made,
// its limits. What the data and the command line say is filled in; everything else
// is named, so that nobody believes it was forgotten or invents it.
package method
