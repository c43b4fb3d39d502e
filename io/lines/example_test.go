package lines_test

import (
	"context"
	"fmt"

	"isofacet/io/lines"
	"isofacet/io/readings"
)

func ExampleBreaklines() {
	const text = `line,x,y,z
toe,0,0,203.0
crest,0,6,207.5
toe,5,0,203.1
crest,5,6,207.4
`
	set, err := lines.Breaklines(context.Background(), []readings.Source{readings.FromBytes("breaks.csv", []byte(text))}, lines.Options{})
	if err != nil {
		fmt.Println(err)
		return
	}
	for _, l := range set.Lines {
		fmt.Println(l.Name, l.Points, l.Z, "from", l.At(0))
	}
	// Output:
	// toe [[0 0] [5 0]] [203 203.1] from breaks.csv:2
	// crest [[0 6] [5 6]] [207.5 207.4] from breaks.csv:3
}

func ExampleStrung() {
	const shots = `id,x,y,z,code
1,0,0,203.0,TOE1 B
2,0,6,207.5,CR1 B
3,5,0,203.1,TOE1
4,3,3,205.2,GR
5,5,6,207.4,CR1 E
6,9,1,203.1,TOE1 E
`
	table, err := lines.ReadCodeTable(context.Background(), readings.FromBytes("codes.toml", []byte(`
ground = ["GR"]
line   = ["TOE", "CR"]
[parts]
separator = " "
number    = "behind"
mark      = "last"
[marks]
begin = ["B"]
end   = ["E"]
`)))
	if err != nil {
		fmt.Println(err)
		return
	}
	codes := lines.NewCodes(table)
	set, err := readings.Read(context.Background(), []readings.Source{readings.FromBytes("shots.csv", []byte(shots))},
		readings.Options{Select: readings.Selection{Code: codes.Choose}})
	if err != nil || codes.Unknown() != nil {
		fmt.Println(err, codes.Unknown())
		return
	}
	strung, err := lines.Strung(set, table)
	if err != nil {
		fmt.Println(err)
		return
	}
	for _, l := range strung.Lines {
		fmt.Println(l.Name, l.Readings, l.PointName(0), "to", l.PointName(len(l.Points)-1))
	}
	// Output:
	// TOE1 [0 2 5] 1 to 6
	// CR1 [1 4] 2 to 5
}
