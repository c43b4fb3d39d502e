package main

import "isofacet/io/outfile"

// An extra is a file about the run rather than a result.
type extra struct {
	option, path string
	file         func(*outputs) **outfile.File
}

// extras are the files about the run that are asked for.
func (w *writing) extras() []extra {
	var list []extra
	if w.record.set {
		list = append(list, extra{"--record", w.recordPath, func(o *outputs) **outfile.File { return &o.record }})
	}
	if w.statement.set {
		list = append(list, extra{"--method-statement", w.statementPath, func(o *outputs) **outfile.File { return &o.statement }})
	}
	return list
}

// finishRecord completes the run record, compares it with what was expected, and
// writes it and the method statement.
func (o *outputs) finishRecord() error {
	rec := o.p.rec
	if rec == nil {
		return nil
	}
	for _, h := range o.hashed {
		h.finish()
		rec.Stable.Outputs = append(rec.Stable.Outputs, h.entry)
	}
	rec.Stable.Warnings = o.p.report.Warnings()
	if s := o.p.step; s != nil && s.expect != nil {
		if err := s.expect.met(rec); err != nil {
			return err
		}
	}
	if o.record != nil {
		if err := rec.Write(o.record); err != nil {
			return err
		}
	}
	if o.statement != nil {
		return o.p.writeStatement(o.statement)
	}
	return nil
}
