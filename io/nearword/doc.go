// Package nearword finds, for a word that is not known, how far known ones are from it,
// so that a message can name the nearest.
//
//	nearword.Distance("intreval", "interval") // 1
//
// Time and memory O(len(a) x len(b)); of words longer than 64 bytes only those count.
//
// Sources: R. A. Wagner and M. J. Fischer, The string-to-string correction problem,
// JACM 21, 1974; swaps of neighbours as in R. Lowrance and R. A. Wagner, An extension of
// the string-to-string correction problem, JACM 22, 1975, each letter in one change only.
package nearword
