// Package assets carries the files that the programs need at run time: the
// typeface, the icons, and the gallery of tables.
package assets

import (
	"embed"
	"io/fs"
	"strings"
)

// Regular is Noto Sans Regular (SIL Open Font License, font/LICENSE.txt). Its
// figures all have one width, so columns of numbers align.
//
//go:embed font/NotoSans-Regular.ttf
var Regular []byte

// Bold is Noto Sans Bold, under the same licence.
//
//go:embed font/NotoSans-Bold.ttf
var Bold []byte

// Icon is the program's icon, a PNG of 512 pixels.
//
//go:embed icon.png
var Icon []byte

//go:embed icons/*.svg
var icons embed.FS

// Stroke is the small icon called name, an SVG of strokes on a grid of 24.
func Stroke(name string) []byte {
	b, err := icons.ReadFile("icons/" + name + ".svg")
	if err != nil {
		panic("assets: no icon " + name)
	}
	return b
}

//go:embed gallery
var gallery embed.FS

// Gallery are the table files of the gallery, in the order in which they are
// shown. They are made up: the products of an invented workshop.
func Gallery() [][]byte {
	names, err := fs.Glob(gallery, "gallery/*.cavity.json")
	if err != nil {
		panic(err)
	}
	var all [][]byte
	for _, n := range names {
		b, err := gallery.ReadFile(n)
		if err != nil {
			panic(err)
		}
		all = append(all, b)
	}
	return all
}

// GalleryNames are the file names of the gallery, without folder and ending.
func GalleryNames() []string {
	names, _ := fs.Glob(gallery, "gallery/*.cavity.json")
	for i, n := range names {
		names[i] = strings.TrimSuffix(strings.TrimPrefix(n, "gallery/"), ".cavity.json")
	}
	return names
}

// Version is the programs' version, and Program the name and version that
// figures carry. FyneApp.toml holds the same.
const (
	Version = "0.1.0"
	Program = "Cavitywright " + Version
)
