package pdf

import (
	"bytes"
	"crypto/sha256"
	"encoding/gob"
	"errors"
	"fmt"
	"image"
	"image/color"
	"image/draw"
	"image/jpeg"
	"image/png"

	"github.com/go-pdf/fpdf"

	"shearbook/report"
)

// raster is an image in a form that a PDF can hold.
type raster struct {
	key    string // the same for the same bytes
	kind   string // "png" or "jpeg"
	data   []byte
	width  int
	height int
}

// mostPixels bounds the memory that an image takes.
const mostPixels = 50e6

// pixelSize is the width of a pixel in points where the column allows it: 96
// pixels an inch.
const pixelSize = 0.75

// image sets a raster image. Its caption is its title, or what stands for it
// where it cannot be seen.
func (s *setter) image(i *report.Image, a area) []*piece {
	r, err := s.raster(i)
	if err != nil {
		s.fail(fmt.Errorf("image %q: %w", i.Name, err))
		return nil
	}
	w, h := pixelSize*float64(r.width), pixelSize*float64(r.height)
	scale := s.fit(w, h, a.width)
	w, h = max(scale*w, 0.1), max(scale*h, 0.1)
	x := a.x + (a.width-w)/2
	drawn := &piece{height: h, ops: []op{&imageOp{x, 0, w, h, r}}}
	caption := i.Title
	if caption == "" {
		caption = i.Alt
	}
	return s.withCaption(drawn, []report.Inline{report.Text(caption)}, w, a)
}

// raster reads an image, once for the same bytes.
func (s *setter) raster(i *report.Image) (*raster, error) {
	sum := sha256.Sum256(i.Data)
	key := i.Format + string(sum[:])
	if r := s.rasters[key]; r != nil {
		return r, nil
	}
	var r *raster
	var err error
	switch i.Format {
	case "png":
		r, err = readPNG(i.Data)
	case "jpeg":
		r, err = readJPEG(i.Data)
	default:
		return nil, fmt.Errorf("format %q is neither png nor jpeg", i.Format)
	}
	if err != nil {
		return nil, err
	}
	r.key = key
	if s.rasters == nil {
		s.rasters = map[string]*raster{}
	}
	s.rasters[key] = r
	return r, nil
}

func checkSize(c image.Config) error {
	if float64(c.Width)*float64(c.Height) > mostPixels {
		return fmt.Errorf("%d by %d pixels are too many for a report, at most %g million", c.Width, c.Height, mostPixels/1e6)
	}
	if c.Width < 1 || c.Height < 1 {
		return errors.New("it has no pixels")
	}
	return nil
}

// readPNG checks a PNG by decoding it. A plain one is embedded as it is,
// others as 8-bit RGB on white.
func readPNG(data []byte) (*raster, error) {
	c, err := png.DecodeConfig(bytes.NewReader(data))
	if err == nil {
		err = checkSize(c)
	}
	if err != nil {
		return nil, err
	}
	img, err := png.Decode(bytes.NewReader(data))
	if err != nil {
		return nil, err
	}
	if plainPNG(data) {
		return &raster{kind: "png", data: data, width: c.Width, height: c.Height}, nil
	}
	return flatPNG(img)
}

// readJPEG checks a JPEG by decoding it. Grey and YCbCr are embedded as they
// are, others as RGB.
func readJPEG(data []byte) (*raster, error) {
	c, err := jpeg.DecodeConfig(bytes.NewReader(data))
	if err == nil {
		err = checkSize(c)
	}
	if err != nil {
		return nil, err
	}
	img, err := jpeg.Decode(bytes.NewReader(data))
	if err != nil {
		return nil, err
	}
	if c.ColorModel == color.GrayModel || c.ColorModel == color.YCbCrModel {
		return &raster{kind: "jpeg", data: data, width: c.Width, height: c.Height}, nil
	}
	return flatPNG(img)
}

// plainPNG tells whether a valid PNG is of a kind that PDF holds as it is: at
// most 8 bits a sample, opaque, not interlaced, no chunk empty but the last.
// ISO/IEC 15948:2003, clause 11.
func plainPNG(data []byte) bool {
	if depth, interlace := data[24], data[28]; depth > 8 || interlace != 0 {
		return false
	}
	switch colourType := data[25]; colourType {
	case 0, 2, 3:
	default:
		return false
	}
	for at := 8; at+12 <= len(data); {
		size, kind := be32(data, at), string(data[at+4:at+8])
		switch {
		case kind == "IEND":
			return true
		case kind == "tRNS", size == 0, size > len(data):
			return false
		}
		at += 12 + size
	}
	return false
}

// flatPNG writes an image as an opaque PNG on white.
func flatPNG(img image.Image) (*raster, error) {
	b := img.Bounds()
	flat := image.NewRGBA(image.Rect(0, 0, b.Dx(), b.Dy()))
	draw.Draw(flat, flat.Bounds(), image.White, image.Point{}, draw.Src)
	draw.Draw(flat, flat.Bounds(), img, b.Min, draw.Over)
	var out bytes.Buffer
	encoder := png.Encoder{CompressionLevel: png.BestSpeed}
	if err := encoder.Encode(&out, flat); err != nil {
		return nil, err
	}
	return &raster{kind: "png", data: out.Bytes(), width: b.Dx(), height: b.Dy()}, nil
}

// register hands an image to fpdf, once.
func (p *printer) register(r *raster) {
	if p.images[r.key] {
		return
	}
	p.images[r.key] = true
	info := p.pdf.RegisterImageOptionsReader(r.key, fpdf.ImageOptions{ImageType: r.kind}, bytes.NewReader(r.data))
	if p.pdf.Err() {
		return
	}
	if n := p.widths[r.width]; n > 0 {
		if err := widen(info, float64(n)*1e-6); err != nil {
			p.pdf.SetError(err)
		}
	}
	p.widths[r.width]++
}

// widen adds a millionth of a pixel to the width that fpdf notes of an image.
// fpdf writes images in the order of their widths, and those of equal width
// in the order in which a map is ranged over, which differs from run to run.
// The width is rounded down where it is written. Its type can be reached only
// through its gob form.
func widen(info *fpdf.ImageInfoType, by float64) error {
	form, err := info.GobEncode()
	if err != nil {
		return err
	}
	var data, mask, palette []byte
	var number, depth int
	var width, height, scale, dpi float64
	var space, filter, parameters string
	var transparent []int
	fields := []any{&data, &mask, &number, &width, &height, &space, &palette, &depth,
		&filter, &parameters, &transparent, &scale, &dpi}
	in := gob.NewDecoder(bytes.NewReader(form))
	for _, f := range fields {
		if err := in.Decode(f); err != nil {
			return err
		}
	}
	width += by
	var out bytes.Buffer
	encoder := gob.NewEncoder(&out)
	for _, f := range fields {
		if err := encoder.Encode(f); err != nil {
			return err
		}
	}
	return info.GobDecode(out.Bytes())
}
