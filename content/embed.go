package content

import (
	"embed"
	"fmt"
	"io/fs"
)

//go:embed all:demo all:begin
var embedded embed.FS

// Demo returns the notebook that is shown where there is none.
func Demo() fs.FS { return folder("demo") }

// Begin returns the small notebook to start from.
func Begin() fs.FS { return folder("begin") }

func folder(name string) fs.FS {
	sub, err := fs.Sub(embedded, name)
	if err != nil { // a misspelt name, which is a fault of the program
		panic(fmt.Sprintf("content: no embedded folder %q: %v", name, err))
	}
	return sub
}
