package readings_test

import (
	"context"
	"errors"
	"fmt"

	"isofacet/io/readings"
)

func ExampleRead() {
	const file = `Point,Northing,Easting,Elev,Code
P1,4600000.00,500000.00,101.25,GRD
P2,4600000.00,500012.50,102.00,GRD
P3,4600009.75,500003.25,100.50,TOE
P4,4600000.00,500012.50,102.00,GRD
`
	set, err := readings.Read(context.Background(), []readings.Source{readings.FromBytes("pit.csv", []byte(file))}, readings.Options{})
	if err != nil {
		fmt.Println(err)
		return
	}
	for i, p := range set.Points {
		fmt.Println(set.ID(i), p[0], p[1], set.Z[i], set.Text(readings.Code, i), "line", set.Lines[i])
	}
	for _, m := range set.Merged {
		fmt.Println(m.ID, "merged into", set.ID(m.Into))
	}
	fmt.Println(set.Layouts[0].String())
	// Output:
	// P1 500000 4.6e+06 101.25 GRD line 2
	// P2 500012.5 4.6e+06 102 GRD line 3
	// P3 500003.25 4.60000975e+06 100.5 TOE line 4
	// P4 merged into P2
	// UTF-8, delimiter comma (detected), decimal point (detected), header in line 1, columns id=Point,y=Northing,x=Easting,z=Elev,code (detected)
}

func ExampleRead_errors() {
	const file = "well,x,y,head\nMW-1,100,200,12.40\nMW-2,150,210,\"12,4\"\nMW-3,120,260,DRY\n"
	_, err := readings.Read(context.Background(), []readings.Source{readings.FromBytes("wells.csv", []byte(file))}, readings.Options{})
	fmt.Println(err)
	var first *readings.PositionError
	if errors.As(err, &first) {
		fmt.Println(first.Line, first.Column, first.Kind == readings.DecimalMark)
	}
	// Output:
	// wells.csv:3:14: z "12,4": expected a number such as 12.4
	// wells.csv:4:14: z "DRY": expected a number such as 12.4
	// 2 lines bad, 1 good
	// 3 14 true
}

func ExampleScan() {
	const file = "x y z\n0 0 1\n1 0 2\n0 1 3\n"
	highest := 0.0
	_, err := readings.Scan(context.Background(), []readings.Source{readings.FromBytes("a.txt", []byte(file))}, readings.Options{},
		func(b *readings.Block) error {
			for _, z := range b.Z {
				highest = max(highest, z)
			}
			return nil
		})
	fmt.Println(highest, err)
	// Output: 3 <nil>
}

func ExampleReadPositions() {
	const file = "label,east,north\n\"gate, left\",10.5,20\n"
	p, err := readings.ReadPositions(context.Background(), readings.FromBytes("asked.csv", []byte(file)), readings.Options{})
	if err != nil {
		fmt.Println(err)
		return
	}
	for i, at := range p.Points {
		fmt.Printf("%v %q\n", at, p.Row(nil, i))
	}
	// Output: [10.5 20] ["gate, left" "10.5" "20"]
}
