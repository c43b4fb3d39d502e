// Package measure holds the stages' promised ratios of time: a test that runs when
// ISOFACET_MEASURE is set, on a quiet machine, all in one run.
package measure
