// Package study runs the whole chain once: project file, scene, climate,
// surface exchange, receivers, the year, glare and daylight metrics, verdicts.
// It owns no physics; it connects the packages that do, and keeps what the
// report needs.
package study
