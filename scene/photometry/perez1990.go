package photometry

import "math"

// Irradiance is what a weather record and the calendar say of one moment.
type Irradiance struct {
	// DHI is the diffuse irradiance on a level plane, DNI the direct one on a
	// plane facing the sun (W/m2). What is negative or NaN counts as 0.
	DHI, DNI float64
	// ZenithRad is the sun's zenith angle. Beyond pi/2 it counts as pi/2.
	ZenithRad float64
	// E0n is the irradiance above the atmosphere on a plane facing the sun
	// (W/m2), as ExtraterrestrialNormal gives it. Zero and NaN mean
	// SolarConstant.
	E0n float64
	// DewPointC is the dew point at the ground.
	DewPointC float64
	// AirMass is the relative optical air mass. Zero and NaN mean
	// AirMassKastenYoung1989 of ZenithRad.
	AirMass float64
}

// Illuminance is what Perez1990 makes of an Irradiance. None of it is negative or
// NaN, and all but Clearness is finite for irradiances that occur on Earth.
type Illuminance struct {
	// Diffuse is the sky's illuminance on a level plane, DirectNormal the sun's
	// on a plane facing it (lx).
	Diffuse, DirectNormal float64
	// Global is the model's own fit for a level plane (lx). It was fitted apart
	// and is not Diffuse + DirectNormal cos Z, from which it departs by some
	// per cent; light that is to add up must be taken from those two.
	Global float64
	// ZenithLuminance is the sky's luminance at the zenith (cd/m2), likewise a
	// fit of its own.
	ZenithLuminance float64
	// Clearness (1 overcast, above 6 clear) and Brightness describe the sky and
	// are what the sky luminance model of 1993 wants. Clearness is +Inf where
	// there is direct light and no diffuse.
	Clearness, Brightness float64
	// Bin is the clearness class, 1 to 8.
	Bin int
}

// Perez1990 returns illuminances and zenith luminance for measured or typical
// irradiances. A fit that turns negative counts as 0.
//
// Source: Perez, Ineichen, Seals, Michalsky & Stewart, Modeling daylight
// availability and irradiance components from direct and global irradiance,
// Solar Energy 44(5), 1990, 271-289: clearness equation 1, brightness equation
// 2, efficacies equations 6 to 8, zenith luminance equation 10, table 4.
// (Equation numbers from memory.)
func Perez1990(in Irradiance) Illuminance {
	dhi, dni := positive(in.DHI), positive(in.DNI)
	z := clampZenith(in.ZenithRad)
	e0n, airMass := positive(in.E0n), positive(in.AirMass)
	if e0n == 0 {
		e0n = SolarConstant
	}
	if airMass == 0 {
		airMass = AirMassKastenYoung1989(z)
	}
	out := Illuminance{
		Clearness:  clearness(dhi, dni, z),
		Brightness: airMass * dhi / e0n,
	}
	out.Bin = ClearnessBin(out.Clearness)

	cosZ := math.Cos(z)
	water := PrecipitableWaterCm(in.DewPointC)
	if !(water < math.Inf(1)) {
		water = PrecipitableWaterCm(0)
	}
	k := out.Bin - 1
	efficacies := &perez1990

	d := efficacies.direct[k]
	out.DirectNormal = math.Max(0, dni*(d[0]+d[1]*water+d[2]*math.Exp(5.73*z-5)+d[3]*out.Brightness))
	if out.Brightness == 0 { // the fits take its logarithm
		out.Global = out.DirectNormal * cosZ
		return out
	}
	lnBrightness := math.Log(out.Brightness)
	f := efficacies.diffuse[k]
	out.Diffuse = math.Max(0, dhi*(f[0]+f[1]*water+f[2]*cosZ+f[3]*lnBrightness))
	g := efficacies.global[k]
	out.Global = math.Max(0, (dhi+dni*cosZ)*(g[0]+g[1]*water+g[2]*cosZ+g[3]*lnBrightness))
	l := efficacies.zenith[k]
	out.ZenithLuminance = math.Max(0, dhi*(l[0]+l[1]*cosZ+l[2]*math.Exp(-3*z)+l[3]*out.Brightness))
	return out
}

// ClearnessBin returns the clearness class, 1 to 8; lower bounds belong to a
// class. Below 1, and for NaN, it is 1.
//
// Source: Perez et al. (1990), table 1.
func ClearnessBin(clearness float64) int {
	bin := 1
	for _, from := range clearnessBounds {
		if clearness >= from {
			bin++
		}
	}
	return bin
}

func clearness(dhi, dni, zenithRad float64) float64 {
	switch {
	case dni == 0:
		return 1
	case dhi == 0:
		return math.Inf(1)
	}
	k := 1.041 * zenithRad * zenithRad * zenithRad
	return ((dhi+dni)/dhi + k) / (1 + k)
}

// positive returns x where it is a finite positive number, and 0 elsewhere.
func positive(x float64) float64 {
	if x > 0 && x <= math.MaxFloat64 {
		return x
	}
	return 0
}

// clearnessBounds are the lower bounds of the classes 2 to 8.
var clearnessBounds = [7]float64{1.065, 1.23, 1.5, 1.95, 2.8, 4.5, 6.2}

// perez1990 holds the coefficients a to d of each class.
// Source: Perez et al. (1990), table 4.
var perez1990 = struct {
	global, diffuse, direct, zenith [8][4]float64
}{
	global: [8][4]float64{
		{96.63, -0.47, 11.5, -9.16},
		{107.54, 0.79, 1.79, -1.19},
		{98.73, 0.7, 4.4, -6.95},
		{92.72, 0.56, 8.36, -8.31},
		{86.73, 0.98, 7.1, -10.94},
		{88.34, 1.39, 6.06, -7.6},
		{78.63, 1.47, 4.93, -11.37},
		{99.65, 1.86, -4.46, -3.15},
	},
	diffuse: [8][4]float64{
		{97.24, -0.46, 12.0, -8.91},
		{107.22, 1.15, 0.59, -3.95},
		{104.97, 2.96, -5.53, -8.77},
		{102.39, 5.59, -13.95, -13.9},
		{100.71, 5.94, -22.75, -23.74},
		{106.42, 3.83, -36.15, -28.83},
		{141.88, 1.9, -53.24, -14.03},
		{152.23, 0.35, -45.27, -7.98},
	},
	direct: [8][4]float64{
		{57.2, -4.55, -2.98, 117.12},
		{98.99, -3.46, -1.21, 12.38},
		{109.83, -4.9, -1.71, -8.81},
		{110.34, -5.84, -1.99, -4.56},
		{106.36, -3.97, -1.75, -6.16},
		{107.19, -1.25, -1.51, -26.73},
		{105.75, 0.77, -1.26, -34.44},
		{101.18, 1.58, -1.1, -8.29},
	},
	zenith: [8][4]float64{
		{40.86, 26.77, -29.59, -45.75},
		{26.58, 14.73, 58.46, -21.25},
		{19.34, 2.28, 100.0, 0.25},
		{13.25, -1.39, 124.79, 15.66},
		{14.47, -5.09, 160.09, 9.13},
		{19.76, -3.88, 154.61, -19.21},
		{28.39, -9.67, 151.58, -69.39},
		{42.91, -19.62, 130.8, -164.08},
	},
}
