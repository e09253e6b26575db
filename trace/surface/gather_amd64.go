//go:build !purego

package surface

import "golang.org/x/sys/cpu"

//go:noescape
func gatherAVX2(acc *Row, rows *Row, links *Link, n int, scale float32)

//go:noescape
func settleAVX2(e, old *Row) (change, total float32)

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

// settle stores e in old and returns the summed change and sum.
func settle(e, old *Row) (change, total float64) {
	if cpu.X86.HasAVX2 {
		c, t := settleAVX2(e, old)
		return float64(c), float64(t)
	}
	return settleGo(e, old)
}
