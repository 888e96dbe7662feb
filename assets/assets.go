// Package assets carries the files that the programs need at run time: the
// typeface and the icon.
package assets

import _ "embed"

// Regular is Noto Sans Regular (SIL Open Font License, font/LICENSE.txt). Its
// figures all have one width, so columns of numbers align.
//
//go:embed font/NotoSans-Regular.ttf
var Regular []byte

// Bold is Noto Sans Bold, under the same licence.
//
//go:embed font/NotoSans-Bold.ttf
var Bold []byte
