package render

import "runtime/debug"

// Program names the program and its version, as pages and provenance state it.
func Program() string {
	version := "development version"
	if info, ok := debug.ReadBuildInfo(); ok && info.Main.Version != "" && info.Main.Version != "(devel)" {
		version = info.Main.Version
	}
	return "Saddlebook, " + version
}
