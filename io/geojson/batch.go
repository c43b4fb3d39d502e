package geojson

import "isofacet/io/outfile"

// blockPositions is how many positions a block of features has at least, unless the features end: some 400 kB of text,
// large against the cost of handing it over and small against memory.
const blockPositions = 1 << 14

// WriteBatch writes features in order, encoded by several workers. The bytes do not depend on how many, nor on how features are
// spread over batches. Up to twice as many blocks as workers are held as text. Errors are those of Write.
func (w *Writer) WriteBatch(features []Feature) error {
	ends := blockEnds(features)
	if len(ends) < 2 {
		for i := range features {
			if err := w.Write(&features[i]); err != nil {
				return err
			}
		}
		return nil
	}
	if err := w.begin(); err != nil {
		return err
	}
	if err := w.flush(); err != nil {
		return err
	}
	tallies := make([]tally, len(ends))
	w.err = outfile.WriteBlocks(w.w, len(ends), w.opt.Workers, func(k int, buf []byte) ([]byte, error) {
		first := 0
		if k > 0 {
			first = ends[k-1]
		}
		enc := encoder{xyPlaces: w.opt.XYDecimals, zPlaces: w.opt.ZDecimals, tally: newTally()}
		buf, err := enc.features(buf, features[first:ends[k]], w.written+first)
		tallies[k] = enc.tally
		return buf, err
	})
	if w.err != nil {
		return w.err
	}
	for k := range tallies {
		w.enc.add(&tallies[k])
	}
	w.written += len(features)
	return nil
}

// blockEnds returns the ends of runs of features with some blockPositions each.
func blockEnds(features []Feature) []int {
	var ends []int
	weight := 0
	for i := range features {
		weight += features[i].Geometry.NumPositions() + 4 // a feature without a shape still costs its properties
		if weight >= blockPositions || i == len(features)-1 {
			ends = append(ends, i+1)
			weight = 0
		}
	}
	return ends
}

// features appends features, the first of which is number before + 1, each with what stands in front of it.
func (e *encoder) features(dst []byte, features []Feature, before int) ([]byte, error) {
	var err error
	for i := range features {
		dst = separate(dst, before+i)
		if dst, err = e.feature(dst, &features[i], before+i+1); err != nil {
			return dst, err
		}
	}
	return dst, nil
}
