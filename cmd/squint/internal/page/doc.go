// Package page makes the interactive report: one HTML file that opens without
// network or installation.
//
// A study is first reduced to an [Archive], a zip file in the results folder:
// design.json with all texts and small numbers, and blobs of packed numbers
// named by a hash of their bytes, so that alternatives share what is alike.
// [Write] puts one or several archives into the page, the blobs as the zip
// file holds them (deflate) in base 85; the browser inflates them when they are
// needed. Texts are plain HTML and stand without scripts; the drawings are made
// by web/, bundled into bundle.js.
package page
