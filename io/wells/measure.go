package wells

import (
	"fmt"
	"strings"

	"isofacet/io/readings"
)

// measure makes the head.
func (d *reduction) measure() bool {
	if d.row.Layout.Has(readings.Z) {
		return d.headAsRead()
	}
	mp, ok := d.measuringPoint()
	if !ok {
		return false
	}
	switch d.meaning {
	case Measured, Dry, Flowing:
	default:
		return d.leaveOut("%s", d.why())
	}
	if !mp.known() {
		if d.well != nil {
			return d.leaveOut("no measuring point: %s has none for %s", d.Table.Name, d.row.Text(readings.ID))
		}
		return d.leaveOut("no measuring point: it is empty")
	}
	d.work.MeasuringPoint = mp.String()
	n := d.row.Number(readings.Depth)
	switch {
	case n.Mark != "":
		return d.leaveOut("depth is %s", n.Mark)
	case n.Kind == readings.Bound && n.Sign != 0:
		d.work.Depth = string(n.Sign) + n.Text
		// The deeper the water, the lower the head.
		return d.bound(mp.minus(exactly(n)), n.Sign == '<' && d.meaning != Dry, fmt.Sprintf("depth %s is a bound, not a level", d.row.Text(readings.Depth)))
	case n.OK():
		return d.level(mp, exactly(n))
	case d.meaning == Measured || n.Kind != readings.Blank && d.row.Text(readings.Status) != "":
		return d.refuseNumber(readings.Depth, n.Kind)
	case d.meaning == Flowing:
		return d.bound(mp, true, "flowing")
	}
	return d.dryWithoutDepth()
}

// why is the reason of a status: its meaning, and the word if that says more.
func (d *reduction) why() string {
	m := d.meaning.String()
	if d.meaning == LeaveOut {
		return fmt.Sprintf("status %q", d.said)
	}
	if key := statusKey(d.said); key != m && !strings.Contains(m, key) {
		return fmt.Sprintf("%s (%q)", m, d.said)
	}
	return m
}

// measuringPoint finds the elevation from which the depth is counted.
func (d *reduction) measuringPoint() (v value, ok bool) {
	const role = readings.MeasuringPoint
	var table value
	if d.well != nil {
		row := d.well.rows[d.k]
		d.work.WellLine, d.work.ValidFrom = row.line, row.said
		table = row.numbers[slot(role)] // not that of another date
	}
	if d.row.Text(role) == "" {
		if !table.known() && d.DepthFrom.Text != "" {
			table = exactly(d.DepthFrom)
		}
		return table, true
	}
	n := d.row.Number(role)
	switch {
	case n.Mark != "":
		return table, true
	case !n.OK():
		return v, d.refuseNumber(role, n.Kind)
	}
	v = exactly(n)
	if table.known() && table.cmp(v) != 0 {
		return v, d.refuse(role, readings.Impossible, "", fmt.Sprintf("%s, as %s:%d has it", table, d.Table.Name, d.work.WellLine))
	}
	return v, true
}

// level makes the head of a depth that was measured.
func (d *reduction) level(mp, depth value) bool {
	d.work.Depth = depth.String()
	if d.meaning == Dry {
		return d.bound(mp.minus(depth), false, "dry")
	}
	product, ok := d.product(depth)
	if !ok {
		return false
	}
	head := mp.minus(depth)
	decimals := head.decimals
	if product.known() && product.sign() > 0 {
		gravity, ok := d.gravity()
		if !ok {
			return false
		}
		if !gravity.known() {
			return d.leaveOut("no specific gravity: product %s thick, and nothing says how heavy it is", product)
		}
		d.work.Product, d.work.SpecificGravity = product.String(), gravity.String()
		head = head.plus(product.times(gravity))
		decimals = max(decimals, product.decimals)
	}
	d.work.Head = head.String()
	if bottom, ok := d.number(readings.ScreenBottom); !ok {
		return false
	} else if bottom.known() && head.cmp(bottom) < 0 {
		return d.boundAt(bottom, false, fmt.Sprintf("head %s is below the bottom of the screen %s: water left in the casing, not a level", head, bottom))
	}
	ground, ok := d.number(readings.Ground)
	if !ok {
		return false
	}
	d.out.Z, d.out.DecimalsZ = head.float(), decimals
	switch {
	case ground.known() && head.cmp(ground) > 0:
		d.out.Warning = fmt.Sprintf("%s: head %s is above the ground %s: a flowing well, or an error", d.name(), head, ground)
	case depth.sign() < 0 && d.meaning != Flowing:
		d.out.Warning = fmt.Sprintf("%s: depth %s is negative: water above the measuring point, or the sign is wrong", d.name(), depth)
	}
	return true
}

func (d *reduction) name() string {
	if id := d.row.Text(readings.ID); id != "" {
		return id
	}
	return "reading"
}

// product returns how thick the product is: a column, or the depth to water less the
// depth to product.
func (d *reduction) product(depth value) (v value, ok bool) {
	if v, ok = d.number(readings.Product); !ok {
		return v, false
	}
	if v.known() && v.sign() < 0 {
		return v, d.refuse(readings.Product, readings.Impossible, "", "a thickness from 0")
	}
	top, ok := d.number(readings.ProductDepth)
	if !ok || !top.known() {
		return v, ok
	}
	d.work.ProductDepth = top.String()
	if top.cmp(depth) > 0 {
		return v, d.refuse(readings.ProductDepth, readings.Impossible, "", fmt.Sprintf("at most the depth to water, %s: product floats on it", depth))
	}
	thick := depth.minus(top)
	if v.known() && v.cmp(thick) != 0 {
		return v, d.refuse(readings.Product, readings.Impossible, "", fmt.Sprintf("%s, by the two depths", thick))
	}
	return thick, true
}

// gravity returns the specific gravity of the product.
func (d *reduction) gravity() (v value, ok bool) {
	const role = readings.SpecificGravity
	if v, ok = d.number(role); !ok {
		return v, false
	}
	if !v.known() && d.Gravity.Text != "" {
		v = exactly(d.Gravity)
	}
	if v.known() && (v.sign() <= 0 || v.float() > 1) {
		if d.row.Text(role) != "" {
			return v, d.refuse(role, readings.Impossible, "", "a number above 0 and at most 1: product floats on water")
		}
		return v, d.leaveOut("specific gravity %s: expected above 0 and at most 1: product floats on water", v)
	}
	return v, true
}

// headAsRead takes a head that stands in the row.
func (d *reduction) headAsRead() bool {
	n := d.row.Number(readings.Z)
	switch {
	case d.meaning != Measured && d.meaning != Dry && d.meaning != Flowing:
		return d.leaveOut("%s", d.why())
	case n.Mark != "":
		return d.leaveOut("z is %s", n.Mark)
	case n.Kind == readings.Bound && n.Sign != 0:
		return d.bound(exactly(n), n.Sign == '>', fmt.Sprintf("head %s is a bound, not a level", d.row.Text(readings.Z)))
	case d.meaning == Dry && n.OK():
		return d.bound(exactly(n), false, "dry")
	case d.meaning == Dry && (n.Kind == readings.Blank || d.row.Text(readings.Status) == ""):
		return d.dryWithoutDepth()
	case !n.OK():
		return d.refuseNumber(readings.Z, n.Kind)
	}
	head := exactly(n)
	ground, ok := d.number(readings.Ground)
	if !ok {
		return false
	}
	d.out.Z, d.out.DecimalsZ, d.work.Head = head.float(), head.decimals, head.String()
	if ground.known() && head.cmp(ground) > 0 {
		d.out.Warning = fmt.Sprintf("%s: head %s is above the ground %s: a flowing well, or an error", d.name(), head, ground)
	}
	return true
}

// dryWithoutDepth leaves a dry well out; its screen says how low the head is.
func (d *reduction) dryWithoutDepth() bool {
	bottom, ok := d.number(readings.ScreenBottom)
	if !ok {
		return false
	}
	if !bottom.known() {
		return d.leaveOut("%s", d.why())
	}
	return d.boundAt(bottom, false, fmt.Sprintf("%s: the head lies below %s, the bottom of the screen", d.why(), bottom))
}

// bound leaves a row out whose head lies above or below a value.
func (d *reduction) bound(v value, above bool, why string) bool {
	side := "below"
	if above {
		side = "above"
	}
	return d.boundAt(v, above, fmt.Sprintf("%s: the head lies %s %s", why, side, v))
}

func (d *reduction) boundAt(v value, above bool, why string) bool {
	sign := "<"
	if above {
		sign = ">"
	}
	d.work.Bound = sign + v.String()
	d.out.Check = &readings.Check{Point: d.out.Point, Z: v.float(), Above: above}
	return d.leaveOut("%s", why)
}
