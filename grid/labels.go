package grid

// Labels say what the numbers of a grid are. Each is carried as given; empty means unstated. Nothing here converts by them.
type Labels struct {
	XYUnit          string // unit of coordinates and cell: "m", "ft-int", "ft-us"
	ZUnit           string // unit of the values
	CRS             string // "EPSG:n"
	HorizontalDatum string
	VerticalDatum   string
	Show            string // what the values are: "value", "slope", "downhill-azimuth"
}
