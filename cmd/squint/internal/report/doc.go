// Package report turns a finished study into what people read: the summary on
// the terminal, and a results folder with summary.json, the hourly series as
// CSV, and each viewpoint's worst hour as OpenEXR and as a false-colour PNG.
//
// Lengths are metres, illuminance lx, luminance cd/m2, shares 0 to 1; angles
// are degrees, and their names say so. Shares on the terminal are per cent.
//
// Files hold no clock time, no path of the machine and no number of threads:
// the same study gives the same bytes. Files are written under temporary names
// and renamed, so that each is whole or absent.
package report
