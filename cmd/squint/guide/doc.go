// Package guide is the user's guide that comes with the program: Markdown
// pages of at most 80 columns that read well as they are.
//
// What the program knows itself is not written twice: the keys of the project
// file with their ranges, defaults and sources, the hours that count, the
// thresholds of the criteria and the exit statuses are put into the pages from
// the tables that the program works with.
package guide
