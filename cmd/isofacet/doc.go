// Isofacet turns scattered x, y, z readings into a surface of planes over
// triangles and reads rasters and values off it.
//
//	isofacet inspect shots.csv
//	isofacet grid shots.csv --cell 2 --out site.csv
//	isofacet query shots.csv --at 431.5,208
//
// Results go to standard output or to the files named with --out, words to
// standard error. "isofacet COMMAND --help" describes a command; what the help
// pages, the manual pages and the README's option table say comes from one
// source, the commands in this folder.
//
// # The files here
//
// main.go passes arguments and streams to run (run.go), which returns the exit
// status. root.go lists the commands; each command is one file that holds its
// words, its flags and its work. The stages that commands share are load.go (from
// files to a surface) and write.go (outputs, all or nothing). explain.go is the one
// place that knows which error gets which exit status and which hint.
package main

//go:generate go run . pages --man man --readme ../../README.md
