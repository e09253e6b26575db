//go:build !purego

#include "textflag.h"

// func gatherAVX2(acc *Row, rows *Row, links *Link, n int, scale float32)
//
// acc[h] += scale * sum over links of W * rows[Side][h], for the 64 entries of
// a row, which stay in eight registers while the links are walked.
TEXT ·gatherAVX2(SB), NOSPLIT, $0-36
	MOVQ acc+0(FP), DI
	MOVQ rows+8(FP), SI
	MOVQ links+16(FP), DX
	MOVQ n+24(FP), CX
	VBROADCASTSS scale+32(FP), Y9
	VMOVUPS (DI), Y0
	VMOVUPS 32(DI), Y1
	VMOVUPS 64(DI), Y2
	VMOVUPS 96(DI), Y3
	VMOVUPS 128(DI), Y4
	VMOVUPS 160(DI), Y5
	VMOVUPS 192(DI), Y6
	VMOVUPS 224(DI), Y7
	TESTQ CX, CX
	JLE done
loop:
	MOVLQSX (DX), AX
	SHLQ $8, AX
	ADDQ SI, AX
	VBROADCASTSS 4(DX), Y8
	VMULPS Y9, Y8, Y8
	VFMADD231PS (AX), Y8, Y0
	VFMADD231PS 32(AX), Y8, Y1
	VFMADD231PS 64(AX), Y8, Y2
	VFMADD231PS 96(AX), Y8, Y3
	VFMADD231PS 128(AX), Y8, Y4
	VFMADD231PS 160(AX), Y8, Y5
	VFMADD231PS 192(AX), Y8, Y6
	VFMADD231PS 224(AX), Y8, Y7
	ADDQ $8, DX
	DECQ CX
	JNZ loop
done:
	VMOVUPS Y0, (DI)
	VMOVUPS Y1, 32(DI)
	VMOVUPS Y2, 64(DI)
	VMOVUPS Y3, 96(DI)
	VMOVUPS Y4, 128(DI)
	VMOVUPS Y5, 160(DI)
	VMOVUPS Y6, 192(DI)
	VMOVUPS Y7, 224(DI)
	VZEROUPPER
	RET

// func settleAVX2(e, old, change, total *Row)
//
// Adds |e-old| to change and e to total, entry by entry, and stores e in old.
TEXT ·settleAVX2(SB), NOSPLIT, $0-32
	MOVQ e+0(FP), SI
	MOVQ old+8(FP), DI
	MOVQ change+16(FP), R8
	MOVQ total+24(FP), R9
	VPCMPEQD Y12, Y12, Y12
	VPSRLD $1, Y12, Y12
	MOVQ $8, CX
row:
	VMOVUPS (SI), Y0
	VSUBPS (DI), Y0, Y1
	VANDPS Y12, Y1, Y1
	VADDPS (R8), Y1, Y1
	VMOVUPS Y1, (R8)
	VADDPS (R9), Y0, Y2
	VMOVUPS Y2, (R9)
	VMOVUPS Y0, (DI)
	ADDQ $32, SI
	ADDQ $32, DI
	ADDQ $32, R8
	ADDQ $32, R9
	DECQ CX
	JNZ row
	VZEROUPPER
	RET
