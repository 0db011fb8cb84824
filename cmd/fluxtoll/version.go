package main

import (
	"fmt"
	"runtime"
	"runtime/debug"
)

// version is one line: program, version, commit, Go version and platform.
func version() string {
	info, ok := debug.ReadBuildInfo()
	if !ok {
		info = &debug.BuildInfo{}
	}
	return describe(info)
}

// describe states what a build knows about its origin.
func describe(info *debug.BuildInfo) string {
	settings := map[string]string{}
	for _, s := range info.Settings {
		settings[s.Key] = s.Value
	}
	release := info.Main.Version
	if release == "" {
		release = "(devel)"
	}
	commit := "commit unknown"
	if revision := settings["vcs.revision"]; revision != "" {
		commit = fmt.Sprintf("commit %s of %s", revision, settings["vcs.time"])
	}
	if settings["vcs.modified"] == "true" {
		commit += " with changes"
	}
	return fmt.Sprintf("fluxtoll %s, %s, %s %s/%s", release, commit, runtime.Version(), runtime.GOOS, runtime.GOARCH)
}
