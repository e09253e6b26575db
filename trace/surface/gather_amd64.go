//go:build !purego

package surface

import "golang.org/x/sys/cpu"

//go:noescape
func gatherAVX2(acc *Row, rows *Row, links *Link, n int, scale float32)

//go:noescape
func settleAVX2(e, old, change, total *Row)

// gather adds scale times the linked rows to acc.
func gather(acc *Row, rows []Row, links []Link, scale float32) {
	if len(links) == 0 {
		return
	}
	if cpu.X86.HasAVX2 && cpu.X86.HasFMA {
		gatherAVX2(acc, &rows[0], &links[0], len(links), scale)
		return
	}
	gatherGo(acc, rows, links, scale)
}

// settle adds |e-old| to change and e to total, entry by entry, and stores e
// in old.
func settle(e, old, change, total *Row) {
	if cpu.X86.HasAVX2 {
		settleAVX2(e, old, change, total)
		return
	}
	settleGo(e, old, change, total)
}
