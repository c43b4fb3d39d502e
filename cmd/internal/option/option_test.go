package option

import (
	"errors"
	"testing"

	"github.com/spf13/pflag"
)

// rows per kind: what is typed, how it prints afterwards, whether it is taken.
func TestValues(t *testing.T) {
	zero := Number{}
	least := zero.Value
	for _, kind := range []struct {
		name string
		make func() pflag.Value
		rows map[string]string // typed -> printed
		bad  []string
	}{
		{"size", func() pflag.Value { return new(Size) },
			map[string]string{
				"512MiB": "512MiB", "2GiB": "2GiB", "1.5GiB": "1.5GiB", "1500": "1.46KiB", "800B": "800B",
				"1GB": "954MiB", "4 KiB": "4KiB", "2TiB": "2TiB", "1kB": "1000B",
			},
			[]string{"", "0", "-1GiB", "GiB", "1XB", "nan", "inf", "1e300TiB", "0.5B", "5mib"}},
		{"cell", func() pflag.Value { return new(Cell) },
			map[string]string{"2": "2", "2.50": "2.5", "2,2.5": "2,2.5", "0.1,0.1": "0.1", "1e-3": "0.001"},
			[]string{"", "0", "-1", "1,", ",1", "1,2,3", "1,0", "a", "1 2", "inf", "nan", "2m"}},
		{"extent", func() pflag.Value { return new(Extent) },
			map[string]string{"0,0,10,20": "0,0,10,20", "-10,-5.5,-1,0": "-10,-5.5,-1,0"},
			[]string{"", "0,0,10", "0,0,0,1", "10,0,0,20", "0,20,10,0", "0,0,10,20,30", "a,b,c,d", "0;0;10;20"}},
		{"number", func() pflag.Value { return &Number{Least: &least} },
			map[string]string{"0": "0", "0.05": "0.05", "1e2": "100"},
			[]string{"", "-0.1", "x", "nan", "1,5"}},
		{"decimals", func() pflag.Value { return new(Decimals) },
			map[string]string{"auto": "auto", "full": "full", "0": "0", "3": "3", "20": "20"},
			[]string{"", "-1", "21", "AUTO", "3.5", "two"}},
		{"threads", func() pflag.Value { return new(Threads) },
			map[string]string{"1": "1", "64": "64"}, []string{"", "0", "-2", "1.5", "all", "5000"}},
		{"rows", func() pflag.Value { return new(Rows) },
			map[string]string{"0": "", "3": "3"}, []string{"", "-2", "1.5", "all"}},
		{"choice", func() pflag.Value { c := NewChoice("matrix", "list"); return &c },
			map[string]string{"matrix": "matrix", "list": "list"}, []string{"", "Matrix", "table"}},
		{"output", func() pflag.Value { return &Outs{Parts: []string{"value", "slope"}} },
			map[string]string{"a.csv": "a.csv", "-": "-", "slope=s.raw": "slope=s.raw", "./x=y.csv": "./x=y.csv", "A=b": "A=b"},
			[]string{"", "slope=", "speed=a.csv"}},
		{"place", func() pflag.Value { return new(At) },
			map[string]string{"1,2": "1,2", "-1.50,2e3": "-1.50,2e3", "wells.csv": "wells.csv", "-": "-", "a,b.csv": "a,b.csv"},
			[]string{"", "5", "1,b", "nan,1", "1,2,3", "1e70,0", "0,-1e-70", "inf,0"}},
		{"label", func() pflag.Value { return new(Label) },
			map[string]string{"NAVD88": "NAVD88", "local, 2019": "local, 2019"}, []string{"", " ", "a\nb"}},
		{"system", func() pflag.Value { return new(System) },
			map[string]string{"EPSG:25832": "EPSG:25832"}, []string{"", "25832", "EPSG:", "EPSG:x", "epsg:25832", "EPSG:0123", "EPSG:12345678"}},
	} {
		for typed, printed := range kind.rows {
			v := kind.make()
			if err := v.Set(typed); err != nil {
				t.Errorf("%s %q: %v", kind.name, typed, err)
			} else if got := v.String(); got != printed {
				t.Errorf("%s %q prints %q, want %q", kind.name, typed, got, printed)
			}
		}
		for _, typed := range kind.bad {
			v := kind.make()
			err := v.Set(typed)
			bad, ok := errors.AsType[*BadValue](err)
			if !ok {
				t.Errorf("%s %q: got %v, want a *BadValue", kind.name, typed, err)
			} else if bad.Seen != typed || bad.Expected == "" {
				t.Errorf("%s %q: reported as %+v", kind.name, typed, bad)
			}
		}
		if kind.make().Type() == "" {
			t.Errorf("%s has no form for the help page", kind.name)
		}
	}
}

func TestDecimalsResolve(t *testing.T) {
	for typed, want := range map[string]int{"auto": 5, "full": -1, "2": 2} {
		var d Decimals
		if err := d.Set(typed); err != nil {
			t.Fatal(err)
		}
		if got := d.Resolve(5); got != want {
			t.Errorf("%s resolves to %d, want %d", typed, got, want)
		}
	}
}

func TestOnceRefusesASecondValue(t *testing.T) {
	fs := pflag.NewFlagSet("test", pflag.ContinueOnError)
	var cell Cell
	var at At
	lenient := fs.Bool("lenient", false, "")
	fs.Var(&cell, "cell", "")
	fs.Var(&at, "at", "")
	Once(fs, "at")
	if err := fs.Parse([]string{"--lenient", "--cell", "2", "--at", "1,-2", "--at", "-3,4"}); err != nil {
		t.Fatal(err)
	}
	if !*lenient || cell.String() != "2" || len(at.Places) != 2 {
		t.Errorf("got lenient %v, cell %v, %d places", *lenient, &cell, len(at.Places))
	}
	if err := fs.Parse([]string{"--cell", "3"}); err == nil {
		t.Error("a second cell is taken")
	} else if cell.String() != "2" {
		t.Errorf("the refused cell is %v, want the first one kept", &cell)
	}
	if err := fs.Parse([]string{"--lenient"}); err == nil {
		t.Error("a switch is taken twice")
	}
}
