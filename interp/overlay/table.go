package overlay

// table finds the slots of a few numbers quickly, and forgets all of them at once.
// Most of its uses hold a dozen: it stays in the nearest cache.
type table struct {
	entries []entry
	shift   uint
	epoch   uint32
	count   int
}

type entry struct {
	epoch     uint32
	key, slot int32
}

const tableLeast = 6 // 64 entries

// clear forgets everything.
func (t *table) clear() {
	if t.entries == nil {
		t.entries = make([]entry, 1<<tableLeast)
		t.shift = 32 - tableLeast
	}
	t.count = 0
	if t.epoch++; t.epoch == 0 {
		clear(t.entries)
		t.epoch = 1
	}
}

// find returns the slot of key, and true if it was there; else it takes slot for it.
func (t *table) find(key, slot int32) (int32, bool) {
	mask := uint32(len(t.entries) - 1)
	for i := uint32(key) * 2654435769 >> t.shift; ; i++ {
		e := &t.entries[i&mask]
		if e.epoch != t.epoch {
			*e = entry{t.epoch, key, slot}
			if t.count++; 2*t.count > len(t.entries) {
				t.grow()
			}
			return slot, false
		}
		if e.key == key {
			return e.slot, true
		}
	}
}

// slotOf returns the slot of key, -1 if it has none.
func (t *table) slotOf(key int32) int32 {
	mask := uint32(len(t.entries) - 1)
	for i := uint32(key) * 2654435769 >> t.shift; ; i++ {
		e := &t.entries[i&mask]
		if e.epoch != t.epoch {
			return -1
		}
		if e.key == key {
			return e.slot
		}
	}
}

func (t *table) grow() {
	old := t.entries
	t.entries = make([]entry, 2*len(old))
	t.shift--
	t.count = 0
	for _, e := range old {
		if e.epoch == t.epoch {
			t.find(e.key, e.slot)
		}
	}
}
