package glare

import "math"

// DGI returns the daylight glare index of sources before a background of
// luminance (cd/m2):
//
//	10 log10 sum 0.478 L^1.6 Omega^0.8 / (Lb + 0.07 omega^0.5 L)
//
// with Omega = omega/P^2. Scale: 16 just perceptible, 20 just acceptable, 22
// borderline, 24 just uncomfortable, 28 just intolerable. Without sources
// -Inf. Source: R. G. Hopkinson, Applied Ergonomics 3 (1972); P. Chauvel et
// al., Lighting Res. Technol. 14 (1982) (from memory).
func DGI(sources []Source, background float64) float64 {
	sum := 0.0
	for _, s := range sources {
		sum += 0.478 * math.Pow(s.MeanLuminance, 1.6) *
			math.Pow(s.OmegaSr/(s.PositionIndex*s.PositionIndex), 0.8) /
			(background + 0.07*math.Sqrt(s.OmegaSr)*s.MeanLuminance)
	}
	return 10 * math.Log10(sum)
}

// UGR returns the unified glare rating 8 log10(0.25/Lb sum L^2 omega/P^2) of
// sourceSum before a background of luminance (cd/m2), which CIE 117 defines
// as the indirect illuminance at the eye over pi. Made for sources of 3e-4 to
// 0.1 sr. Without sources -Inf, without background +Inf. Source: CIE
// 117-1995 (from memory).
func UGR(sourceSum, background float64) float64 {
	if sourceSum <= 0 {
		return math.Inf(-1)
	}
	return 8 * math.Log10(0.25/background*sourceSum)
}

// Range of source sizes UGR was made for. Source: CIE 117-1995 (from memory).
const (
	MinUGROmegaSr = 3e-4
	MaxUGROmegaSr = 0.1
)

// CGI returns the CIE glare index
// 8 log10(2 (1 + Ed/500)/(Ed + Ei) sum L^2 omega/P^2) with Ed and Ei the
// direct and indirect illuminance at the eye (lx). Without sources -Inf.
// Source: H. D. Einhorn, Lighting Res. Technol. 11 (1979) (from memory).
func CGI(sourceSum, eDirect, eIndirect float64) float64 {
	if sourceSum <= 0 {
		return math.Inf(-1)
	}
	return 8 * math.Log10(2*(1+eDirect/500)/(eDirect+eIndirect)*sourceSum)
}

// DGR returns the discomfort glare rating (sum M)^(n^-0.0914) of n sources
// with M = 0.5 L Q/(P F^0.44), Q = 20.4 omega + 1.52 omega^0.2 - 0.075, and
// fieldMean = F the mean luminance of the whole field of view (cd/m2).
// Source: IES (from memory, fairly sure).
func DGR(sources []Source, fieldMean float64) float64 {
	sum := 0.0
	for _, s := range sources {
		// Q is negative below 3e-7 sr, where the fit means nothing.
		q := math.Max(0, 20.4*s.OmegaSr+1.52*math.Pow(s.OmegaSr, 0.2)-0.075)
		sum += 0.5 * s.MeanLuminance * q / (s.PositionIndex * math.Pow(fieldMean, 0.44))
	}
	if sum <= 0 {
		return 0
	}
	return math.Pow(sum, math.Pow(float64(len(sources)), -0.0914))
}

// VCP returns the visual comfort probability (percent of observers who accept
// the sources) of a discomfort glare rating: 100 Phi(6.374 - 1.3227 ln DGR),
// Phi being the normal distribution. Not intended for windows. Source: IES
// (from memory, fairly sure).
func VCP(dgr float64) float64 {
	if dgr <= 0 {
		return 100
	}
	x := 6.374 - 1.3227*math.Log(dgr)
	return 50 * math.Erfc(-x/math.Sqrt2)
}
