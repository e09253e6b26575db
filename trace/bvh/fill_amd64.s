//go:build amd64 && !purego

#include "go_asm.h"
#include "textflag.h"

// GROW adds the box in Y0 to the bin of the axis whose boxes start at the
// given offset and whose counts at another.
#define GROW(axis, bin) \
	INCL    bins_n+128*axis(DI)(bin*4) \
	SHLQ    $5, bin                   \
	VMINPS  1024*axis(DI)(bin*1), Y0, Y4 \
	VMOVUPS Y4, 1024*axis(DI)(bin*1)

// func fillAVX2(bs *bins, ps *prim, n int, lo, scale *[4]float32)
TEXT ·fillAVX2(SB), NOSPLIT, $0-40
	MOVQ     bs+0(FP), DI
	MOVQ     ps+8(FP), SI
	MOVQ     n+16(FP), CX
	MOVQ     lo+24(FP), AX
	MOVQ     scale+32(FP), BX
	VMOVUPS  (AX), X5
	VMOVUPS  (BX), X6
	VPCMPEQD X7, X7, X7
	VPSRLD   $27, X7, X7 // binCount-1

loop:
	VMOVUPS      (SI), Y0
	VMOVUPS      16(SI), X1
	VSUBPS       X1, X0, X2
	VSUBPS       X5, X2, X2
	VMULPS       X6, X2, X2
	VCVTTPS2DQ   X2, X2
	VPAND        X7, X2, X2
	VMOVQ        X2, R8
	VPEXTRD      $2, X2, R10
	MOVQ         R8, R9
	MOVL         R8, R8
	SHRQ         $32, R9
	GROW(0, R8)
	GROW(1, R9)
	GROW(2, R10)
	ADDQ         $32, SI
	DECQ         CX
	JNE          loop
	VZEROUPPER
	RET

// func partitionAVX2(ps *prim, n int, c *cut, mids *[2]span) int
// partitionGo without branches: a triangle changes places with the first right
// one, which then starts one further if the triangle is a left one.
TEXT ·partitionAVX2(SB), NOSPLIT, $0-40
	MOVQ         ps+0(FP), SI
	MOVQ         n+8(FP), CX
	MOVQ         c+16(FP), AX
	MOVQ         mids+24(FP), DI
	VBROADCASTSS cut_lo(AX), X5
	VBROADCASTSS cut_scale(AX), X6
	VPBROADCASTD cut_bin(AX), X7
	VPBROADCASTD cut_axis(AX), Y8
	VPCMPEQD     X9, X9, X9
	VPSLLD       $31, X9, X9    // sign bits
	VMOVUPS      (DI), Y10      // left middles
	VMOVUPS      32(DI), Y11    // right middles
	VMOVAPS      Y10, Y12       // empty
	MOVQ         SI, DX         // first right one
	MOVQ         SI, BX

loop:
	VMOVUPS      (BX), Y0
	VMOVUPS      16(BX), X1
	VMOVUPS      (DX), Y4
	VMOVUPS      Y4, (BX)
	VMOVUPS      Y0, (DX)
	VSUBPS       X1, X0, X1
	VSUBPS       X5, X1, X2
	VMULPS       X6, X2, X2
	VCVTTPS2DQ   X2, X2
	VPCMPGTD     X2, X7, X2     // left
	VPERMD       Y2, Y8, Y2
	VMOVD        X2, R8
	VXORPS       X9, X1, X3
	VINSERTF128  $1, X3, Y1, Y1
	VBLENDVPS    Y2, Y1, Y12, Y3
	VBLENDVPS    Y2, Y12, Y1, Y1
	VMINPS       Y3, Y10, Y10
	VMINPS       Y1, Y11, Y11
	ANDL         $32, R8
	ADDQ         R8, DX
	ADDQ         $32, BX
	DECQ         CX
	JNE          loop
	VMOVUPS      Y10, (DI)
	VMOVUPS      Y11, 32(DI)
	SUBQ         SI, DX
	SHRQ         $5, DX
	MOVQ         DX, ret+32(FP)
	VZEROUPPER
	RET

// func scanAVX2(box *span, count, step int, sum *span, area *float32)
TEXT ·scanAVX2(SB), NOSPLIT, $0-40
	MOVQ    box+0(FP), SI
	MOVQ    count+8(FP), CX
	MOVQ    step+16(FP), DX
	MOVQ    sum+24(FP), DI
	MOVQ    area+32(FP), BX
	MOVQ    DX, R8
	SHLQ    $5, DX
	SHLQ    $2, R8
	VMOVUPS (SI), Y0
	JMP     first

loop:
	VMINPS (SI), Y0, Y0

first:
	VMOVUPS      Y0, (DI)
	VEXTRACTF128 $1, Y0, X1
	VADDPS       X1, X0, X1
	VPERMILPS    $0xc9, X1, X2 // y z x
	VMOVHLPS     X1, X1, X3    // z
	VADDSS       X3, X2, X4    // y+z
	VMULSS       X4, X1, X4
	VMULSS       X3, X2, X2
	VADDSS       X2, X4, X4
	VMOVSS       X4, (BX)
	ADDQ         DX, SI
	ADDQ         DX, DI
	ADDQ         R8, BX
	DECQ         CX
	JNE          loop
	VZEROUPPER
	RET
