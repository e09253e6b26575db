//go:build amd64 && !purego

#include "funcdata.h"
#include "go_asm.h"
#include "textflag.h"

// The loops of walk.go, eight children or triangles at a time. Additions and
// multiplications are kept apart so that both give the same bits; fusing them
// would also break the watertight test, whose edge functions must change only
// their sign when two triangles share an edge.
//
// Registers while in nodes:
//	Y0-Y2	origin shifted for near planes, x y z
//	Y3-Y5	origin shifted for far planes
//	Y6 Y13 Y14	-1/direction
//	R8-R10	byte offsets of the near planes, R11-R13 of the far planes
//	R14	byte offset of the children's order
//	R15	compress table
//	SI stack pointer, AX node or block, DX its reference
// A leaf uses all Y registers and BX, CX, DX.

// Frame: vectors, then the stack of references, then that of distances.
#define REFS 0
#define TMIN 32
#define TMAX 64
#define DIST 96
#define VNUM 128
#define WNUM 160
#define DETS 192
#define NEARO 224 // origin for near planes, x y z
#define FARO 240
#define NRDIR 256 // -1/direction
#define SHEARS 272 // origin kx ky kz, sx, sy, -1/dir[kz]
#define AXES 296 // byte offsets of kx ky kz in a vertex of a block
#define STACK 320
#define NEAR 2048 // from a reference to its distance

#define END $0x80000000 // the reference at the bottom of the stack

// PLANES loads what nodes need.
#define PLANES \
	VBROADCASTSS NEARO+0(SP), Y0  \
	VBROADCASTSS NEARO+4(SP), Y1  \
	VBROADCASTSS NEARO+8(SP), Y2  \
	VBROADCASTSS FARO+0(SP), Y3   \
	VBROADCASTSS FARO+4(SP), Y4   \
	VBROADCASTSS FARO+8(SP), Y5   \
	VBROADCASTSS NRDIR+0(SP), Y6  \
	VBROADCASTSS NRDIR+4(SP), Y13 \
	VBROADCASTSS NRDIR+8(SP), Y14

// SETUP is query.set and the bottom of the stack.
#define SETUP \
	MOVQ         r+16(FP), DI              \
	VMOVSS       ray_org+0(DI), X0         \
	VINSERTPS    $0x10, ray_org+4(DI), X0, X0 \
	VINSERTPS    $0x20, ray_org+8(DI), X0, X0 \
	VMOVSS       ray_dir+0(DI), X1         \
	VINSERTPS    $0x10, ray_dir+4(DI), X1, X1 \
	VINSERTPS    $0x20, ray_dir+8(DI), X1, X1 \
	VBROADCASTSS ray_shift(DI), X2         \
	VPCMPEQD     X3, X3, X3                \
	VPSLLD       $31, X3, X3               \
	VANDPS       X3, X1, X4                \
	VORPS        X4, X2, X2                \
	VADDPS       X2, X0, X5                \
	VSUBPS       X2, X0, X6                \
	VANDNPS      X1, X3, X7                \
	VMAXPS       tiny<>(SB), X7, X7        \
	VORPS        X4, X7, X7                \
	VMOVUPS      minus<>(SB), X8           \
	VDIVPS       X7, X8, X7                \
	VMOVUPS      X5, NEARO(SP)             \
	VMOVUPS      X6, FARO(SP)              \
	VMOVUPS      X7, NRDIR(SP)             \
	VMOVMSKPS    X1, R14                   \
	LEAQ         ·compress(SB), R15       \
	MOVL         R14, R8                   \
	MOVL         R14, R9                   \
	MOVL         R14, R10                  \
	SHLL         $5, R8                    \
	SHLL         $4, R9                    \
	SHLL         $3, R10                   \
	ANDL         $32, R8                   \
	ANDL         $32, R9                   \
	ANDL         $32, R10                  \
	MOVL         R8, R11                   \
	MOVL         R9, R12                   \
	MOVL         R10, R13                  \
	XORL         $32, R11                  \
	XORL         $32, R12                  \
	XORL         $32, R13                  \
	SHLL         $2, R14                   \
	VBROADCASTSS ray_tmin(DI), Y7          \
	VBROADCASTSS ray_tmax(DI), Y8          \
	VMOVUPS      Y7, TMIN(SP)              \
	VMOVUPS      Y8, TMAX(SP)              \
	MOVLQSX      ray_kz(DI), DX            \
	LEAQ         axes<>(SB), SI            \
	MOVLQZX      (SI)(DX*4), BX            \
	MOVLQZX      4(SI)(DX*4), CX           \
	VMOVSS       NRDIR(SP)(DX*4), X9       \
	VMOVSS       X9, SHEARS+20(SP)         \
	VXORPS       X3, X9, X9                \
	VMULSS       ray_dir(DI)(BX*4), X9, X10 \
	VMULSS       ray_dir(DI)(CX*4), X9, X11 \
	VMOVSS       ray_org(DI)(BX*4), X12    \
	VMOVSS       ray_org(DI)(CX*4), X13    \
	VMOVSS       ray_org(DI)(DX*4), X14    \
	VMOVSS       X12, SHEARS+0(SP)         \
	VMOVSS       X13, SHEARS+4(SP)         \
	VMOVSS       X14, SHEARS+8(SP)         \
	VMOVSS       X10, SHEARS+12(SP)        \
	VMOVSS       X11, SHEARS+16(SP)        \
	SHLL         $5, BX                    \
	SHLL         $5, CX                    \
	SHLL         $5, DX                    \
	MOVL         BX, AXES+0(SP)            \
	MOVL         CX, AXES+4(SP)            \
	MOVL         DX, AXES+8(SP)            \
	LEAQ         STACK(SP), SI             \
	MOVL         END, (SI)                 \
	MOVL         $-1, NEAR(SI)             \
	ADDQ         $4, SI                    \
	MOVQ         nodes+0(FP), AX

// SLABS leaves the entry distances in Y7 and a mask of missed children in Y8.
#define SLABS \
	VSUBPS   (AX)(R8*1), Y0, Y7     \
	VSUBPS   64(AX)(R9*1), Y1, Y8   \
	VSUBPS   128(AX)(R10*1), Y2, Y9 \
	VSUBPS   (AX)(R11*1), Y3, Y10   \
	VSUBPS   64(AX)(R12*1), Y4, Y11 \
	VSUBPS   128(AX)(R13*1), Y5, Y12 \
	VMULPS   Y6, Y7, Y7             \
	VMULPS   Y13, Y8, Y8            \
	VMULPS   Y14, Y9, Y9            \
	VMULPS   Y6, Y10, Y10           \
	VMULPS   Y13, Y11, Y11          \
	VMULPS   Y14, Y12, Y12          \
	VPMAXSD  Y8, Y7, Y7             \
	VPMAXSD  TMIN(SP), Y9, Y9       \
	VPMINSD  Y11, Y10, Y10          \
	VPMINSD  TMAX(SP), Y12, Y12     \
	VPMAXSD  Y9, Y7, Y7             \
	VPMINSD  Y12, Y10, Y10          \
	VPCMPGTD Y10, Y7, Y8

// SHEAR makes the sheared coordinates x, y of the vertex at the given offset
// from its z.
#define SHEAR(offset, z, x, y) \
	VSUBPS offset(AX)(BX*1), Y1, x \
	VMULPS Y3, z, Y6               \
	VSUBPS Y6, x, x                \
	VSUBPS offset(AX)(CX*1), Y2, y \
	VMULPS Y4, z, Y6               \
	VSUBPS Y6, y, y

// CROSS makes out = a*b - c*d.
#define CROSS(a, b, c, d, out, tmp) \
	VMULPS a, b, out   \
	VMULPS c, d, tmp   \
	VSUBPS tmp, out, out

// EDGES makes the edge functions Y0, Y1, Y2 from the sheared vertices in
// Y10-Y15.
#define EDGES \
	CROSS(Y14, Y13, Y15, Y12, Y0, Y6) \
	CROSS(Y10, Y15, Y11, Y14, Y1, Y6) \
	CROSS(Y12, Y11, Y13, Y10, Y2, Y6)

// SIGNS leaves in Y6 which triangles have edge functions of both signs, and in
// CX the bits of the others with the zero flag.
#define SIGNS \
	VMINPS    Y0, Y1, Y3    \
	VMAXPS    Y0, Y1, Y4    \
	VXORPS    Y5, Y5, Y5    \
	VMINPS    Y2, Y3, Y3    \
	VMAXPS    Y2, Y4, Y4    \
	VCMPPS    $1, Y5, Y3, Y6 \
	VCMPPS    $1, Y4, Y5, Y4 \
	VANDPS    Y6, Y4, Y6    \
	VMOVMSKPS Y6, CX        \
	XORL      $0xff, CX

// CROSS64 replaces out by a*b - c*d in float64 where Y3 is set.
#define CROSS64(aX, aY, bX, bY, cX, cY, dX, dY, out) \
	VCVTPS2PD    aX, Y4         \
	VCVTPS2PD    bX, Y7         \
	VMULPD       Y7, Y4, Y4     \
	VCVTPS2PD    cX, Y7         \
	VCVTPS2PD    dX, Y8         \
	VMULPD       Y8, Y7, Y7     \
	VSUBPD       Y7, Y4, Y4     \
	VCVTPD2PSY   Y4, X4         \
	VEXTRACTF128 $1, aY, X7     \
	VEXTRACTF128 $1, bY, X8     \
	VCVTPS2PD    X7, Y7         \
	VCVTPS2PD    X8, Y8         \
	VMULPD       Y8, Y7, Y7     \
	VEXTRACTF128 $1, cY, X8     \
	VEXTRACTF128 $1, dY, X9     \
	VCVTPS2PD    X8, Y8         \
	VCVTPS2PD    X9, Y9         \
	VMULPD       Y9, Y8, Y8     \
	VSUBPD       Y8, Y7, Y7     \
	VCVTPD2PSY   Y7, X7         \
	VINSERTF128  $1, X7, Y4, Y4 \
	VBLENDVPS    Y3, Y4, out, out

// BLOCK tests the triangles of the block referred to by DX. It leaves the
// edge functions in Y0, Y1, Y2, their sum in Y3, the distances in Y4 and a mask
// of the triangles hit in CX, with its zero flag. It goes to done if edge
// functions differ in sign in all triangles.
#define BLOCK(done, exact) \
	NOTL         DX                    \
	SHRL         $3, DX                \
	LEAQ         (DX)(DX*4), AX        \
	SHLQ         $6, AX                \
	ADDQ         blocks+8(FP), AX      \
	MOVLQZX      AXES+0(SP), BX      \
	MOVLQZX      AXES+4(SP), CX      \
	MOVLQZX      AXES+8(SP), DX      \
	VBROADCASTSS SHEARS+8(SP), Y0   \
	VBROADCASTSS SHEARS+0(SP), Y1   \
	VBROADCASTSS SHEARS+4(SP), Y2   \
	VBROADCASTSS SHEARS+12(SP), Y3      \
	VBROADCASTSS SHEARS+16(SP), Y4      \
	VSUBPS       (AX)(DX*1), Y0, Y7    \
	VSUBPS       96(AX)(DX*1), Y0, Y8  \
	VSUBPS       192(AX)(DX*1), Y0, Y9 \
	SHEAR(0, Y7, Y10, Y11)             \
	SHEAR(96, Y8, Y12, Y13)            \
	SHEAR(192, Y9, Y14, Y15)           \
	EDGES                              \
	SIGNS                              \
	JEQ          done                  \
	VMULPS       Y0, Y1, Y3            \
	VMULPS       Y2, Y3, Y3            \
	VCMPPS       $0, Y5, Y3, Y3        \
	VANDNPS      Y3, Y6, Y4            \
	VMOVMSKPS    Y4, DX                \
	TESTL        DX, DX                \
	JEQ          exact                 \
	VCMPPS       $0, Y5, Y0, Y3        \
	VCMPPS       $0, Y5, Y1, Y4        \
	VORPS        Y4, Y3, Y3            \
	VCMPPS       $0, Y5, Y2, Y4        \
	VORPS        Y4, Y3, Y3            \
	VMOVUPS      Y7, DIST(SP)          \
	VMOVUPS      Y8, VNUM(SP)          \
	VMOVUPS      Y9, WNUM(SP)          \
	CROSS64(X14, Y14, X13, Y13, X15, Y15, X12, Y12, Y0) \
	CROSS64(X10, Y10, X15, Y15, X11, Y11, X14, Y14, Y1) \
	CROSS64(X12, Y12, X11, Y11, X13, Y13, X10, Y10, Y2) \
	VMOVUPS      DIST(SP), Y7          \
	VMOVUPS      VNUM(SP), Y8          \
	VMOVUPS      WNUM(SP), Y9          \
	SIGNS                              \
	JEQ          done

// CROSSING goes on from BLOCK's label exact.
#define CROSSING \
	VBROADCASTSS SHEARS+20(SP), Y11    \
	VADDPS       Y1, Y0, Y3            \
	VMULPS       Y11, Y7, Y7           \
	VMULPS       Y11, Y8, Y8           \
	VMULPS       Y11, Y9, Y9           \
	VADDPS       Y2, Y3, Y3            \
	VMULPS       Y0, Y7, Y7            \
	VMULPS       Y1, Y8, Y8            \
	VMULPS       Y2, Y9, Y9            \
	VADDPS       Y8, Y7, Y7            \
	VADDPS       Y9, Y7, Y7            \
	VDIVPS       Y3, Y7, Y4            \
	VADDPS       Y5, Y4, Y4            \
	VMOVUPS      TMIN(SP), Y8          \
	VCMPPS       $2, Y4, Y8, Y9        \
	VCMPPS       $2, TMAX(SP), Y4, Y10 \
	VANDPS       Y9, Y10, Y9           \
	VANDNPS      Y9, Y6, Y9            \
	VMOVMSKPS    Y9, CX                \
	TESTL        CX, CX

// func closestAVX2(nodes *node, blocks *block, r *ray, h *Hit)
TEXT ·closestAVX2(SB), 0, $4448-32
	NO_LOCAL_POINTERS
	SETUP
	PLANES

node:
	SLABS
	VPBROADCASTD node_order(AX)(R14*1), Y15
	VPSRLVD      shifts<>(SB), Y15, Y15
	VPERMD       Y8, Y15, Y8
	VMOVMSKPS    Y8, CX
	VPERMD       node_ref(AX), Y15, Y9
	VPERMD       Y7, Y15, Y7
	VMOVDQU      Y9, REFS(SP)
	XORL         $0xff, CX
	JEQ          pop
	TZCNTL       CX, DX
	MOVL         REFS(SP)(DX*4), DX
	BLSRL        CX, CX
	VPMOVZXBD    (R15)(CX*8), Y10
	VPERMD       Y9, Y10, Y9
	VPERMD       Y7, Y10, Y7
	VMOVDQU      Y9, (SI)
	VMOVDQU      Y7, NEAR(SI)
	POPCNTL      CX, CX
	LEAQ         (SI)(CX*4), SI
	TESTL        DX, DX
	JMI          leaf
	SHLQ         $8, DX
	MOVQ         nodes+0(FP), AX
	ADDQ         DX, AX
	JMP          node

pop:
	MOVL TMAX(SP), CX

next:
	SUBQ  $4, SI
	CMPL  NEAR(SI), CX
	JGT   next
	MOVL  (SI), DX
	TESTL DX, DX
	JMI   leaf
	SHLQ  $8, DX
	MOVQ  nodes+0(FP), AX
	ADDQ  DX, AX
	JMP   node

leaf:
	CMPL    DX, END
	JEQ     end
	BLOCK(tested, exact)

exact:
	CROSSING
	JEQ     tested
	VMOVUPS Y1, VNUM(SP)
	VMOVUPS Y2, WNUM(SP)
	VMOVUPS Y3, DETS(SP)
	VMOVUPS Y4, DIST(SP)
	MOVQ    h+24(FP), BX

commit:
	TZCNTL CX, DX
	MOVL   DIST(SP)(DX*4), DI
	CMPL   DI, TMAX(SP)
	JGT    skip
	JLT    take
	MOVL   Hit_Prim(BX), DI      // of equals the lowest, -1 being no hit
	TESTL  DI, DI
	JMI    take
	CMPL   DI, block_prim(AX)(DX*4)
	JLT    skip

take:
	VMOVSS       DIST(SP)(DX*4), X7
	VMOVSS       DETS(SP)(DX*4), X8
	VMOVSS       VNUM(SP)(DX*4), X9
	VMOVSS       WNUM(SP)(DX*4), X10
	VDIVSS       X8, X9, X9
	VDIVSS       X8, X10, X10
	VMOVSS       X7, Hit_T(BX)
	VMOVSS       X9, Hit_U(BX)
	VMOVSS       X10, Hit_V(BX)
	MOVL         block_prim(AX)(DX*4), DI
	MOVL         DI, Hit_Prim(BX)
	VBROADCASTSS X7, Y7
	VMOVUPS      Y7, TMAX(SP)

skip:
	BLSRL CX, CX
	JNE  commit

tested:
	PLANES
	JMP pop

end:
	VZEROUPPER
	RET

// func occludedAVX2(nodes *node, blocks *block, r *ray) bool
TEXT ·occludedAVX2(SB), 0, $4448-25
	NO_LOCAL_POINTERS
	SETUP
	PLANES

node:
	SLABS
	VMOVMSKPS Y8, CX
	VMOVDQU   node_ref(AX), Y9
	XORL      $0xff, CX
	JEQ       pop
	TZCNTL    CX, DX
	MOVL      node_ref(AX)(DX*4), DX
	BLSRL     CX, CX
	VPMOVZXBD (R15)(CX*8), Y10
	VPERMD    Y9, Y10, Y9
	VMOVDQU   Y9, (SI)
	POPCNTL   CX, CX
	LEAQ      (SI)(CX*4), SI
	TESTL     DX, DX
	JMI       leaf

descend:
	SHLQ $8, DX
	MOVQ nodes+0(FP), AX
	ADDQ DX, AX
	JMP  node

pop:
	SUBQ  $4, SI
	MOVL  (SI), DX
	TESTL DX, DX
	JPL   descend

leaf:
	CMPL DX, END
	JEQ  end
	BLOCK(tested, exact)

exact:
	CROSSING
	JNE  hit

tested:
	SUBQ  $4, SI
	MOVL  (SI), DX
	TESTL DX, DX
	JMI   leaf
	PLANES
	JMP   descend

hit:
	MOVL $1, CX
	JMP  out

end:
	XORL CX, CX

out:
	VZEROUPPER
	MOVB CX, ret+24(FP)
	RET

// axes holds kx at kz and ky at kz+1.
DATA axes<>+0(SB)/8, $0x0000000200000001
DATA axes<>+8(SB)/8, $0x0000000100000000
GLOBL axes<>(SB), RODATA|NOPTR, $16

DATA tiny<>+0(SB)/8, $0x1780000017800000 // tinyDir
DATA tiny<>+8(SB)/8, $0x1780000017800000
GLOBL tiny<>(SB), RODATA|NOPTR, $16

DATA minus<>+0(SB)/8, $0xbf800000bf800000 // -1
DATA minus<>+8(SB)/8, $0xbf800000bf800000
GLOBL minus<>(SB), RODATA|NOPTR, $16

// shifts brings the nibble of each lane down; VPERMD reads three bits.
DATA shifts<>+0(SB)/8, $0x0000000400000000
DATA shifts<>+8(SB)/8, $0x0000000c00000008
DATA shifts<>+16(SB)/8, $0x0000001400000010
DATA shifts<>+24(SB)/8, $0x0000001c00000018
GLOBL shifts<>(SB), RODATA|NOPTR, $32

