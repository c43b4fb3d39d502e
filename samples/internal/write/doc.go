// Command write puts the generated samples into the current folder. It is run
// by go generate in the samples' folder; files that are already right are
// left alone, so that their times do not change.
package main
