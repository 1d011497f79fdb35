// Command lotpair is the desktop program. It is built with CGO_ENABLED=1 and the tag migrated_fynedo; built without C it
// can only render its window to a picture and says what is missing.
package main

import (
	"fmt"
	"os"

	"lotpair/app"
)

// version is stamped at release by the linker.
var version = "0.1.0-dev"

func main() {
	if err := app.Command(os.Args[1:], version, window); err != nil {
		fmt.Fprintln(os.Stderr, "lotpair:", err)
		os.Exit(1)
	}
}
