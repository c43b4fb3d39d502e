package picture

// turn returns the unit vector, east and north, of an azimuth in degrees: sine and cosine with the same bits on every processor,
// which those of the library do not have. The azimuth is taken back to within 45 degrees of an axis, where the series to the
// 15th and 16th power are right to 1e-16.
func turn(azimuth float64) (east, north float64) {
	quarter := 0
	for azimuth < -45 {
		azimuth += 90
		quarter += 3
	}
	for azimuth > 45 {
		azimuth -= 90
		quarter++
	}
	x := float64(azimuth * (3.141592653589793 / 180))
	q := float64(x * x)
	s, c := 1.0, 1.0
	for n := 14.0; n > 0; n -= 2 {
		s = 1 - float64(float64(s*q)/float64((n+1)*n))
		c = 1 - float64(float64(c*q)/float64((n+2)*(n+1)))
	}
	s = float64(s * x)
	c = 1 - float64(float64(c*q)/2)
	switch quarter % 4 {
	case 1:
		return c, -s
	case 2:
		return -s, -c
	case 3:
		return -c, s
	}
	return s, c
}
