package main

import (
	"bytes"
	"encoding/csv"
	"os"
	"strings"
	"testing"
)

// suspectTable writes the suspects of a run of inspect and reads the table.
func suspectTable(t *testing.T, args ...string) [][]string {
	t.Helper()
	runQuietly(t, "", append(append([]string{"inspect"}, args...), "--write-suspects", "suspects.csv")...)
	f, err := os.Open("suspects.csv")
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	return rows
}

// decide fills in decision and reason of the row of each id, and writes the table.
func decide(t *testing.T, rows [][]string, decision, reason string, ids ...string) {
	t.Helper()
	var b strings.Builder
	w := csv.NewWriter(&b)
	left := len(ids)
	for i, row := range rows {
		for _, id := range ids {
			if i > 0 && row[0] == id {
				row[len(row)-2], row[len(row)-1] = decision, reason
				left--
			}
		}
		if err := w.Write(row); err != nil {
			t.Fatal(err)
		}
	}
	w.Flush()
	if left != 0 {
		t.Fatalf("%d of %v have no row", left, ids)
	}
	if err := os.WriteFile("decided.csv", []byte(b.String()), 0o666); err != nil {
		t.Fatal(err)
	}
}

// TestSuspectsOfTheSample: the blunders of the gravel pit are found, with lines and
// without, and named (its answers.json tells of them); a decision about them goes back through --exclude.
func TestSuspectsOfTheSample(t *testing.T) {
	t.Chdir(t.TempDir())
	const pit = "sample:gravel-pit/shots.csv"
	for _, options := range [][]string{nil, {"--breaklines", "sample:gravel-pit/lines/breaklines.csv"}} {
		args := append([]string{pit, "--without", "code=BP"}, options...)
		rows := suspectTable(t, args...)
		notes := map[string]string{}
		for _, row := range rows[1:] {
			notes[row[0]] = row[7]
			if row[10] != "" || row[11] != "" {
				t.Errorf("%q: decision and reason are for a person", row)
			}
		}
		if note := notes["2060"]; !strings.Contains(note, "a digit dropped: 212.892") {
			t.Errorf("2060: %q, want the dropped digit", note)
		}
		if note := notes["2107"]; !strings.Contains(note, "a rod 1.2 longer than noted") {
			t.Errorf("2107: %q, want the rod's section", note)
		}
		if len(notes) > 25 {
			t.Errorf("%v: %d suspects among 1,534 readings", options, len(notes))
		}
	}
	rows := suspectTable(t, pit)
	before := runQuietly(t, "", "inspect", pit, "--format", "json")
	if again := runQuietly(t, "", "inspect", pit, "--format", "json", "--exclude", "suspects.csv"); again != before {
		t.Error("rows without a decision change the report")
	}
	decide(t, rows, "leave out", "checked in the book", "2060", "2107")
	var out, words bytes.Buffer
	if code := run([]string{"inspect", pit, "--exclude", "decided.csv"}, streams{strings.NewReader(""), &out, &words}); code != 0 {
		t.Fatalf("exit status %d\n%s", code, &words)
	}
	for _, want := range []string{"exclude: decided.csv: 2 rows to leave out, ", "checked in the book (decided.csv:2)"} {
		if !strings.Contains(words.String(), want) {
			t.Errorf("no %q in\n%s", want, &words)
		}
	}
	if !strings.Contains(out.String(), "2 left out") || strings.Contains(out.String(), "suspect    2060") || strings.Contains(out.String(), "suspect    2107") {
		t.Errorf("the two are not left out:\n%s", &out)
	}
	decide(t, rows, "leave out", "", "2060", "2107")
	words.Reset()
	if code := run([]string{"inspect", pit, "--exclude", "decided.csv"}, streams{strings.NewReader(""), &out, &words}); code != 0 {
		t.Fatalf("exit status %d\n%s", code, &words)
	}
	if n := strings.Count(words.String(), "leaves out without a reason: not followed"); n != 2 {
		t.Errorf("%d rows without a reason are warned of, want 2:\n%s", n, &words)
	}
}

// TestSuspectsWithoutIDs round-trips by place, at coordinates whose text is long.
func TestSuspectsWithoutIDs(t *testing.T) {
	t.Chdir(t.TempDir())
	var b strings.Builder
	b.WriteString("x,y,z\n")
	for i := range 20 {
		for k := range 20 {
			z := "10.00"
			if i == 9 && k == 9 {
				z = "15.00"
			}
			b.WriteString(strings.Join([]string{number{float64(i)*10 + float64(k)/3, -1}.String(), number{float64(k)*10 + float64(i)/7, -1}.String(), z}, ",") + "\n")
		}
	}
	if err := os.WriteFile("shots.csv", []byte(b.String()), 0o666); err != nil {
		t.Fatal(err)
	}
	rows := suspectTable(t, "shots.csv")
	if len(rows) != 2 || rows[1][0] != "" || rows[1][9] != "191" {
		t.Fatalf("rows %q, want the reading of line 191", rows)
	}
	decide(t, rows, "leave out", "a bird", "")
	if text := runQuietly(t, "", "inspect", "shots.csv", "--exclude", "decided.csv"); !strings.Contains(text, "1 left out") || !strings.Contains(text, "suspects   0 readings of") {
		t.Errorf("the reading is not left out:\n%s", text)
	}
}
