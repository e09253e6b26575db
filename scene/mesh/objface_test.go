package mesh

import "testing"

func TestPeriod(t *testing.T) {
	tests := []struct {
		corners []int
		want    int // by hand
	}{
		{nil, 0}, {[]int{1, 2}, 2}, {[]int{1, 1, 1, 1}, 4}, {[]int{1, 2, 3, 4}, 4},
		{[]int{1, 2, 3, 1, 2, 3}, 3}, {[]int{1, 2, 3, 1, 2, 4}, 6}, {[]int{1, 2, 3, 1, 2, 3, 1}, 7},
		{[]int{1, 2, 3, 4, 1, 2, 3, 4, 1, 2, 3, 4}, 4}, {[]int{1, 2, 1, 2, 1, 2, 1, 2}, 4},
	}
	for _, tt := range tests {
		if got := period(tt.corners); got != tt.want {
			t.Errorf("period(%v) = %d, want %d", tt.corners, got, tt.want)
		}
	}
}

func TestResolve(t *testing.T) {
	tests := []struct {
		i, count, want int
		ok             bool
	}{
		{1, 4, 0, true}, {4, 4, 3, true}, {5, 4, 4, false}, {0, 4, -1, false},
		{-1, 4, 3, true}, {-4, 4, 0, true}, {-5, 4, -1, false}, {1, 0, 0, false}, {-1, 0, -1, false},
	}
	for _, tt := range tests {
		if got, ok := resolve(tt.i, tt.count); got != tt.want || ok != tt.ok {
			t.Errorf("resolve(%d, %d) = %d, %v; want %d, %v", tt.i, tt.count, got, ok, tt.want, tt.ok)
		}
	}
}
