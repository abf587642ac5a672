package plan

import (
	"shadeledger/leaf/traits"
	"shadeledger/scenarios/ledger"
)

// CheckLeaf tells what a plan refuses in the leaf block of a seedling, written as under an item of seedlings, four spaces in. species is its
// library name; a name that the library does not know is a plant with traits of its own.
func CheckLeaf(species, block string) []Fault {
	r := &reader{file: "leaf"}
	root, ok := r.document([]byte("seedlings:\n  - name: " + quote(species) + "\n" + block))
	if !ok {
		return r.faults
	}
	for _, item := range r.items(r.fields(val{node: root})["seedlings"]) {
		q := &plantReader{reader: r, block: item, f: r.fields(item)}
		if s, err := traits.Find(species); err == nil {
			q.species, q.base = s, s.Plant()
		}
		q.leaf(&ledger.Plant{})
	}
	return sortFaults(r.faults)
}
