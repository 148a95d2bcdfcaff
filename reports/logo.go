package reports

import (
	"bytes"
	"image"
	"image/draw"
	_ "image/jpeg" // logos come as PNG or JPEG
	"image/png"
)

// flat is a logo as an 8-bit PNG on white: PDF viewers and libraries differ in what
// else they can show. nil where the picture is damaged.
func flat(logo []byte) []byte {
	if logo == nil {
		return nil
	}
	src, _, err := image.Decode(bytes.NewReader(logo))
	if err != nil {
		return nil
	}
	dst := image.NewRGBA(image.Rect(0, 0, src.Bounds().Dx(), src.Bounds().Dy()))
	draw.Draw(dst, dst.Bounds(), image.White, image.Point{}, draw.Src)
	draw.Draw(dst, dst.Bounds(), src, src.Bounds().Min, draw.Over)
	var out bytes.Buffer
	if png.Encode(&out, dst) != nil {
		return nil
	}
	return out.Bytes()
}
