package gen

// landfillJob is the landfill's job: head maps of all rounds, as isofacet run reads
// it.
const landfillJob = `# Head maps of the shallow zone for every round: isofacet run sample:landfill/heads.toml

[settings]                      # for every task whose command takes them
wells            = "sample:landfill/wells.csv"
only             = "zone=shallow"
each             = "round"
round-span       = "1d"
xy-unit          = "ft-us"
z-unit           = "ft-us"
vertical-datum   = "site benchmark BM-1"
horizontal-datum = "site grid"

[[task]]
name             = "lines"
command          = "contour"
files            = "sample:landfill/gauging.csv"
interval         = 1
out              = ["heads-{round}.geojson", "heads-{round}.svg"]
method-statement = "heads-{round}.txt"

[[task]]
name             = "raster"
command          = "grid"
files            = "sample:landfill/gauging.csv"
cell             = 25
out              = "heads-{round}.csv"
`
