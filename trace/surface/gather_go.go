//go:build !amd64 || purego

package surface

func gather(acc *Row, rows []Row, links []Link, scale float32) { gatherGo(acc, rows, links, scale) }

func settle(e, old, change, total *Row) { settleGo(e, old, change, total) }
