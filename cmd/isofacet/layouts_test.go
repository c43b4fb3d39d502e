package main

import (
	"bytes"
	"encoding/binary"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
	"unicode/utf16"
)

// layout is one way in which an office writes the same survey.
type layout struct {
	name    string
	write   func(shots []shot) []byte
	options []string
}

// shot is a line of the survey, as texts with decimal points.
type shot struct{ id, x, y, z, code string }

// joined writes shots with a function for a line.
func joined(head string, line func(s shot) string) func([]shot) []byte {
	return func(shots []shot) []byte {
		var b strings.Builder
		b.WriteString(head)
		for _, s := range shots {
			b.WriteString(line(s))
		}
		return []byte(b.String())
	}
}

func comma(text string) string { return strings.ReplaceAll(text, ".", ",") }

// exponent writes 431293.026 as 431293026e-3.
func exponent(text string) string {
	whole, part, _ := strings.Cut(text, ".")
	return fmt.Sprintf("%s%se-%d", whole, part, len(part))
}

var layouts = []layout{
	{"commas, northing first", joined("point,northing,easting,elevation,code\n",
		func(s shot) string { return strings.Join([]string{s.id, s.y, s.x, s.z, s.code}, ",") + "\n" }), nil},
	{"semicolons and decimal commas", joined("Code;Point ID;Easting (m);Northing (m);Elev. (m)\r\n",
		func(s shot) string {
			return strings.Join([]string{s.code, s.id, comma(s.x), comma(s.y), comma(s.z)}, ";") + "\r\n"
		}), nil},
	{"tabs, a comment, a row of units, a byte order mark", joined("\ufeff# the pit, third day\nid\tx\ty\tz\tcode\n\tm\tm\tm\t\n",
		func(s shot) string { return strings.Join([]string{s.id, s.x, s.y, s.z, s.code}, "\t") + "\n" }), nil},
	{"blanks and no header, declared", joined("", func(s shot) string {
		return fmt.Sprintf("  %-8s %12s %12s  %s   %s\n", s.id, s.x, s.y, s.z, s.code)
	}), []string{"--columns", "id,x,y,z,code"}},
	{"quotes, bars, carriage returns alone, empty columns at the end", joined("\"id\"|\"code\"|\"z\"|\"y\"|\"x\"||\r", func(s shot) string {
		return fmt.Sprintf("\"%s\"|\"%s\"|\"%s\"| \"%s\" |\"%s\"||\r", s.id, s.code, s.z, s.y, s.x)
	}), nil},
	{"UTF-16, columns by number, rows to skip", func(shots []shot) []byte {
		text := "printed on Monday\nby the office\nnr,k,hoch,rechts,h\n"
		for _, s := range shots {
			text += strings.Join([]string{s.id, s.code, s.y, s.x, s.z}, ",") + "\n"
		}
		b := []byte{0xff, 0xfe}
		for _, u := range utf16.Encode([]rune(text)) {
			b = binary.LittleEndian.AppendUint16(b, u)
		}
		return b
	}, []string{"--skip-rows", "2", "--columns", "id=1,code=2,y=3,x=4,z=5"}},
	{"exponents, signs, the lines the other way round", func(shots []shot) []byte {
		var lines []string
		for _, s := range shots {
			lines = append(lines, fmt.Sprintf("%s,+%s,%s,%s,%s\n", s.id, exponent(s.x), exponent(s.y), exponent(s.z), s.code))
		}
		for i, j := 0, len(lines)-1; i < j; i, j = i+1, j-1 {
			lines[i], lines[j] = lines[j], lines[i]
		}
		return []byte("id,E,N,height,feature\n" + strings.Join(lines, ""))
	}, []string{"--columns", "id=id,x=E,y=N,z=height,code=feature"}},
	{"other columns between, no end of the last line", func(shots []shot) []byte {
		text := "day,id,x,crew,y,z,code,remark\n"
		for _, s := range shots {
			text += strings.Join([]string{"3", s.id, s.x, "two, with dog", s.y, s.z, s.code, "12,4"}, ";") + "\n"
		}
		text = strings.Replace(text, "day,id,x,crew,y,z,code,remark", "day;id;x;crew;y;z;code;remark", 1)
		return []byte(strings.TrimSuffix(text, "\n"))
	}, nil},
}

// One survey in eight layouts: the same bytes, of everything that is made of it (P2).
func TestLayoutsGiveTheSameBytes(t *testing.T) {
	data, err := readSample("gravel-pit/shots.csv")
	if err != nil {
		t.Fatal(err)
	}
	var shots []shot
	for i, line := range strings.Split(strings.TrimSpace(string(data)), "\n") {
		f := strings.Split(strings.TrimSpace(line), ",")
		if i == 0 || len(f) != 5 || f[4] == "BP" || i%4 > 0 {
			continue
		}
		shots = append(shots, shot{f[0], f[2], f[1], f[3], f[4]})
	}
	if len(shots) < 300 {
		t.Fatalf("%d shots", len(shots))
	}
	dir := t.TempDir()
	commands := [][]string{
		{"grid", "--cell", "5"},
		{"contour", "--interval", "1"},
		{"triangles"},
		{"query", "--at", "431250,5621500", "--explain"},
		{"inspect", "--format", "json"},
	}
	first := make([][]byte, len(commands))
	for n, l := range layouts {
		name := fmt.Sprintf("shots-%d.txt", n)
		if err := os.WriteFile(filepath.Join(dir, name), l.write(shots), 0o666); err != nil {
			t.Fatal(err)
		}
		for k, c := range commands {
			args := append(append([]string{c[0], name, "--same-spot", "mean", "--quiet"}, c[1:]...), l.options...)
			cmd := exec.Command("isofacet", args...)
			cmd.Dir = dir
			var words bytes.Buffer
			cmd.Stderr = &words
			got, err := cmd.Output()
			if err != nil {
				t.Fatalf("%s: %v: %v\n%s", l.name, args, err, &words)
			}
			if n == 0 {
				first[k] = got
			}
			if !bytes.Equal(got, first[k]) {
				t.Errorf("%s: %s gives other bytes than %s", l.name, c[0], layouts[0].name)
			}
		}
	}
}
