package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"strings"

	"isofacet/cmd/internal/option"
	"isofacet/cmd/internal/status"
	"isofacet/grid"
	"isofacet/io/gridcsv"
	"isofacet/io/gridraw"
)

// A rasterInput is a raster to read: a CSV, or a raw file with its description.
type rasterInput struct {
	*input
	beside *input // nil for a CSV
}

// rasterInput returns the input of a raster. What follows from its name shows here.
func (p *program) rasterInput(name string) (*rasterInput, error) {
	r := &rasterInput{}
	var err error
	if r.input, err = p.input(name); err != nil {
		return nil, err
	}
	if r.path == "" || !isRaw(r.path) {
		return r, nil
	}
	beside := besidePath(name)
	if _, err := os.Stat(beside); err != nil {
		return nil, &gridraw.PairError{Data: name, Seen: "no " + filepath.Base(beside) + " beside it", Expected: "data and description"}
	}
	r.beside, err = p.input(beside)
	return r, err
}

// isRaw goes by the extension, in small or capital letters.
func isRaw(path string) bool { return strings.EqualFold(filepath.Ext(path), ".raw") }

// rasterShare is the part of the memory that the values of a raster may take: a
// CSV is held as text as well, up to four times their size, and what is made of
// them takes room too.
const rasterShare = 8

// readRaster reads a raster. noData is the mark in a CSV, "" for none but the empty
// field.
func (p *program) readRaster(ctx context.Context, r *rasterInput, noData string) (*grid.Grid, error) {
	_, finish := p.display.Stage("reading")
	defer finish()
	limit := int64(p.budget.Bytes / rasterShare)
	g, err := r.decode(ctx, noData, limit, p.workers())
	if errors.Is(err, grid.ErrTooBig) {
		return nil, status.With(status.TooBig, err, fmt.Sprintf("values may take an eighth of the memory, %v: take a part of the raster, or a larger --memory", option.Size(limit)))
	}
	if err != nil {
		return nil, err
	}
	e := describe(g.Spec)
	text := fmt.Sprintf("%s and %s of cell %s, from %s,%s to %s,%s, values at %s",
		counted(g.Spec.Cols, "column"), counted(g.Spec.Rows, "row"), cellText(g.Spec.CellX, g.Spec.CellY), e.XMin, e.YMin, e.XMax, e.YMax, e.ValuesAt)
	r.file.Layout = text
	p.report.Note("raster: "+r.Name+": "+text, "file", r.Name, "columns", g.Spec.Cols, "rows", g.Spec.Rows)
	return g, nil
}

func (r *rasterInput) decode(ctx context.Context, noData string, limit int64, workers int) (*grid.Grid, error) {
	data, err := r.open(ctx)
	if err != nil {
		return nil, err
	}
	defer data.Close()
	if r.beside == nil {
		return gridcsv.Read(data, gridcsv.ReadOptions{Name: r.Name, NoData: noData, LimitBytes: limit, Workers: workers})
	}
	text, err := r.beside.all(ctx)
	if err != nil {
		return nil, err
	}
	g, err := gridraw.Decode(data, r.beside.Name, text, gridraw.ReadOptions{LimitBytes: limit, Workers: workers})
	if err != nil {
		return nil, err
	}
	// To the very end, so that the record has the hash of the whole.
	_, err = io.Copy(io.Discard, data)
	return g, err
}

// open opens an input so that reading ends with the run.
func (in *input) open(ctx context.Context) (io.ReadCloser, error) {
	f, err := in.Open()
	if err != nil {
		return nil, fileError(in.Name, err)
	}
	return &endingReader{f, ctx}, nil
}

type endingReader struct {
	io.ReadCloser
	ctx context.Context
}

func (r *endingReader) Read(b []byte) (int, error) {
	if err := r.ctx.Err(); err != nil {
		return 0, err
	}
	return r.ReadCloser.Read(b)
}

// descriptionMost is far beyond what the description of a raster takes.
const descriptionMost = 1 << 20

// all returns what a small input holds.
func (in *input) all(ctx context.Context) ([]byte, error) {
	f, err := in.open(ctx)
	if err != nil {
		return nil, err
	}
	defer f.Close()
	text, err := io.ReadAll(io.LimitReader(f, descriptionMost+1))
	if err == nil && len(text) > descriptionMost {
		err = &gridraw.DescriptionError{Name: in.Name, Seen: "more than 1 MiB", Expected: "the description of a raw raster"}
	}
	return text, err
}

// explainRaster is the way out of a raster that cannot be read.
func explainRaster(err error) (status.Code, string, bool) {
	if _, ok := errors.AsType[*gridcsv.ReadError](err); ok {
		return status.WrongData, "a raster is a matrix or a list as isofacet grid writes it; --no-data names a number that stands for no value", true
	}
	if _, ok := errors.AsType[*gridraw.PairError](err); ok {
		return status.WrongData, "the .raw and the .json beside it belong together: write both again", true
	}
	if _, ok := errors.AsType[*gridraw.DescriptionError](err); ok {
		return status.WrongData, "isofacet grid --out FILE.raw writes a description that is read back", true
	}
	return 0, "", false
}
