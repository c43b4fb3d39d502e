// Package suspect looks for blunders among readings: those that lie off what the others
// around them make one expect. It names them; it changes nothing.
//
//	left, err := surface.LeaveOneOut(ctx, 0)
//	res, err := suspect.Find(ctx, surface, left, suspect.Options{ScaleLeast: 0.001})
//	for _, s := range res.Suspects {
//		fmt.Println(s.Vertex, s.Residual, s.Off)
//	}
//
// # How
//
// Every vertex is expected from the others (interp.LeaveOneOut); its residual is its
// height less that. What residuals usually come to about a vertex, the scale, is taken
// from the vertices two and three edges away: 1.4826 times the median absolute deviation
// from their median (Hampel 1974). The nearest neighbours are left out of it, because a
// blunder spoils what is expected of them. Where a prediction reaches further than nine
// tenths of those about it, the scale grows as the square of that, as errors of linear
// interpolation do on curved ground.
//
// The vertex that lies off by most scales is taken out, its neighbours are expected and
// judged anew, and so on until none lies off by more than Factor. In the end those taken
// out are compared with the surface of the others: one that only looked off because of its
// neighbour is let go. (Iterated deletion with robust scales: Rousseeuw and Leroy 1987 for
// the idea; screens by neighbours in terrain models: Hannah 1981, Felicísimo 1994.)
//
// A vertex on a line is compared with other vertices on lines. It also passes if it fits
// its line, on the way from the one neighbour along it to the other: at a bend the star of
// a crest looks off, and a peak of the line looks off from along it. Taken out, it keeps
// its place, at the height that the rest of the line has there, so that the line keeps its
// course.
//
// What cannot be judged is not a suspect: the outline, and where fewer than eight
// residuals are found about a vertex.
//
// # Runs and groups
//
// Shots in succession that are moved by one amount vouch for each other. So each is also
// expected from all but the sixteen shots about it in the sequence; a run is a stretch of
// five and more that lie off to one side by one amount. The clearest is taken out and
// what lies beside it expected anew, before the next is named. Groups are codes most of
// whose shots lie off to one side: tops of walls, trees.
package suspect
