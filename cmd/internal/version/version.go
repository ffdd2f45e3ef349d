// Package version is what this build calls itself. The version is part of
// every record it writes, so it is a constant of the source and never taken
// from the build's surroundings. It refuses to know anything else.
//
//	fmt.Println("steelyard", version.Version)
package version

// Version is the version of the engine. It changes whenever the same record
// could come out with other bytes.
const Version = "0.1.0"
