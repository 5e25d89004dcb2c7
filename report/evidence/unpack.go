package evidence

import (
	"bytes"
	"compress/zlib"
	"errors"
	"io"
	"slices"
)

var errTooLarge = errors.New("it unpacks to more than a report holds")

// unpack returns the content of a stream, at most what is left of room, and
// takes it from there.
func (f *file) unpack(st *stream, room *int) ([]byte, error) {
	data := st.raw
	filter, parms := f.resolve(st.dict["Filter"]), f.resolve(st.dict["DecodeParms"])
	if l, ok := filter.(list); ok {
		if len(l) > 1 {
			return nil, errors.New("a stream is packed in a way that is not read here")
		}
		filter = nil
		if len(l) == 1 {
			filter = f.resolve(l[0])
		}
	}
	if l, ok := parms.(list); ok && len(l) == 1 {
		parms = f.resolve(l[0])
	}
	switch filter {
	case nil:
	case name("FlateDecode"):
		var err error
		if data, err = inflate(data, *room); err != nil {
			return nil, err
		}
	default:
		return nil, errors.New("a stream is packed in a way that is not read here")
	}
	if *room -= len(data); *room < 0 {
		return nil, errTooLarge
	}
	if d, ok := parms.(dict); ok {
		return f.unpredict(data, d)
	}
	return data, nil
}

// inflate unpacks at most some bytes. What is large is measured first, so
// that no more memory is taken than it needs.
func inflate(data []byte, most int) ([]byte, error) {
	const small = 1 << 20
	out, err := inflateInto(make([]byte, 0, min(small, 4*len(data)+512)), data, min(small, most))
	if !errors.Is(err, errTooLarge) || most <= small {
		return out, err
	}
	z, err := zlib.NewReader(bytes.NewReader(data))
	if err != nil {
		return nil, damaged("a packed stream: %w", err)
	}
	n, err := io.Copy(io.Discard, io.LimitReader(z, int64(most)+1))
	switch {
	case n > int64(most):
		return nil, errTooLarge
	case err != nil:
		return nil, damaged("a packed stream: %w", err)
	}
	return inflateInto(make([]byte, 0, n+1), data, most)
}

// inflateInto unpacks at most some bytes behind those of out.
func inflateInto(out, data []byte, most int) ([]byte, error) {
	z, err := zlib.NewReader(bytes.NewReader(data))
	if err != nil {
		return nil, damaged("a packed stream: %w", err)
	}
	for {
		if len(out) == cap(out) {
			out = slices.Grow(out, len(out)+512)
		}
		n, err := z.Read(out[len(out):min(cap(out), most+1)])
		out = out[:len(out)+n]
		switch {
		case len(out) > most:
			return nil, errTooLarge
		case err == io.EOF:
			return out, nil
		case err != nil:
			return nil, damaged("a packed stream: %w", err)
		}
	}
}

// unpredict undoes the predictors of PNG (ISO 32000-1, 7.4.4.4), as tables of
// objects have them.
func (f *file) unpredict(data []byte, parms dict) ([]byte, error) {
	predictor, _ := f.resolve(parms["Predictor"]).(float64)
	columns, ok := f.resolve(parms["Columns"]).(float64)
	if !ok {
		columns = 1
	}
	if predictor <= 1 {
		return data, nil
	}
	for _, key := range []name{"Colors", "BitsPerComponent"} {
		if v, ok := f.resolve(parms[key]).(float64); ok && v != map[name]float64{"Colors": 1, "BitsPerComponent": 8}[key] {
			return nil, errors.New("a stream is packed in a way that is not read here")
		}
	}
	if predictor < 10 || columns < 1 || columns > 1<<16 {
		return nil, errors.New("a stream is packed in a way that is not read here")
	}
	n := int(columns)
	out := make([]byte, 0, len(data))
	above := make([]byte, n)
	for len(data) > n {
		row := bytes.Clone(data[1 : 1+n])
		if !unfilter(data[0], row, above) {
			return nil, damaged("a packed table cannot be read")
		}
		out = append(out, row...)
		above, data = row, data[1+n:]
	}
	return out, nil
}

// unfilter undoes one row of filter 0 to 4 for one byte a pixel.
func unfilter(kind byte, row, above []byte) bool {
	for i := range row {
		left, corner := 0, 0
		if i > 0 {
			left, corner = int(row[i-1]), int(above[i-1])
		}
		up := int(above[i])
		switch kind {
		case 0:
			return true
		case 1:
			row[i] += byte(left)
		case 2:
			row[i] += byte(up)
		case 3:
			row[i] += byte((left + up) / 2)
		case 4:
			row[i] += byte(paeth(left, up, corner))
		default:
			return false
		}
	}
	return true
}

// paeth is the predictor of PNG's filter 4 (ISO/IEC 15948, 9.4).
func paeth(left, up, corner int) int {
	p := left + up - corner
	dl, du, dc := abs(p-left), abs(p-up), abs(p-corner)
	switch {
	case dl <= du && dl <= dc:
		return left
	case du <= dc:
		return up
	}
	return corner
}

func abs(v int) int { return max(v, -v) }
