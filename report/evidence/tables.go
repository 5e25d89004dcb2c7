package evidence

import "bytes"

// startxref returns where the newest table is.
func (f *file) startxref() (int, error) {
	tail := f.data[max(0, len(f.data)-1100):]
	i := bytes.LastIndex(tail, []byte("startxref"))
	if i < 0 {
		return 0, damaged("its end, which says where things are, is missing")
	}
	s := f.scanner(len(f.data) - len(tail) + i + len("startxref"))
	s.space()
	at, ok := s.integer()
	s.blank()
	if !ok || !bytes.HasPrefix(f.data[min(s.at, len(f.data)):], []byte("%%EOF")) {
		return 0, damaged("its last lines are not those of a PDF")
	}
	return at, nil
}

// blank skips white space, but no comment.
func (s *scanner) blank() {
	for s.at < len(s.data) && white(s.data[s.at]) {
		s.at++
	}
}

// section reads a cross-reference table or stream and returns where the one
// before it is, -1 if there is none.
func (f *file) section(at int) (previous int, err error) {
	s := f.scanner(at)
	s.space()
	var trailer dict
	if bytes.HasPrefix(f.data[s.at:], []byte("xref")) {
		s.at += len("xref")
		trailer, err = f.rows(s)
	} else {
		trailer, err = f.xrefStream(s.at)
	}
	if err != nil {
		return 0, err
	}
	if f.trailer == nil {
		f.trailer = trailer
	}
	if hybrid, ok := trailer["XRefStm"].(float64); ok {
		if _, err := f.xrefStream(int(hybrid)); err != nil {
			return 0, err
		}
	}
	switch previous := trailer["Prev"].(type) {
	case nil:
		return -1, nil
	case float64:
		if previous < 0 || previous >= float64(len(f.data)) {
			return 0, damaged("an older cross-reference table lies outside the file")
		}
		return int(previous), nil
	default:
		return 0, damaged("the place of an older cross-reference table is no number")
	}
}

// rows reads the rows of a table and the trailer behind it.
func (f *file) rows(s *scanner) (dict, error) {
	for {
		s.space()
		if bytes.HasPrefix(f.data[s.at:], []byte("trailer")) {
			s.at += len("trailer")
			o, _ := s.object()
			d, ok := o.(dict)
			if s.err != nil || !ok {
				return nil, damaged("the trailer cannot be read")
			}
			return d, nil
		}
		first, ok1 := s.integer()
		s.space()
		count, ok2 := s.integer()
		if !ok1 || !ok2 {
			return nil, damaged("its cross-reference table cannot be read")
		}
		if s.err != nil {
			return nil, s.err
		}
		if first+count > maxObjects {
			return nil, damaged("it speaks of more than %d objects", maxObjects)
		}
		for n := first; n < first+count; n++ {
			s.space()
			offset, ok1 := s.integer()
			s.space()
			_, ok2 := s.integer()
			s.space()
			kind := s.peek(0)
			s.at = min(s.at+1, len(f.data))
			f.budget.bytes -= 20
			if !ok1 || !ok2 || kind != 'n' && kind != 'f' {
				return nil, damaged("row %d of its cross-reference table cannot be read", n)
			}
			f.enter(n, entry{offset: offset}, kind == 'n')
		}
	}
}

// enter notes where an object is, unless a newer table has said so.
func (f *file) enter(n int, e entry, used bool) {
	if _, known := f.table[n]; known {
		return
	}
	if !used {
		e = entry{}
	}
	f.table[n] = e
}

// xrefStream reads a cross-reference stream (ISO 32000-1, 7.5.8).
func (f *file) xrefStream(at int) (dict, error) {
	_, o, err := f.objectAt(at)
	if err != nil {
		return nil, err
	}
	st, ok := o.(*stream)
	if !ok || st.dict["Type"] != name("XRef") {
		return nil, damaged("no cross-reference table is where its end says")
	}
	data, err := f.unpack(st, &f.budget.packed)
	if err != nil {
		return nil, err
	}
	var widths [3]int
	w, _ := st.dict["W"].(list)
	for i := range min(len(w), 3) {
		v, _ := w[i].(float64)
		if v < 0 || v > 8 {
			return nil, damaged("its cross-reference stream cannot be read")
		}
		widths[i] = int(v)
	}
	size, _ := st.dict["Size"].(float64)
	index, ok := st.dict["Index"].(list)
	if !ok {
		index = list{0.0, size}
	}
	row := widths[0] + widths[1] + widths[2]
	for i := 0; i+1 < len(index); i += 2 {
		first, ok1 := count(index[i])
		rows, ok2 := count(index[i+1])
		if !ok1 || !ok2 || row == 0 || rows > len(data)/row {
			return nil, damaged("its cross-reference stream cannot be read, or speaks of more than %d objects", maxObjects)
		}
		for n := range rows {
			f.enterPacked(first+n, data[:row], widths)
			data = data[row:]
		}
	}
	return st.dict, nil
}

// count returns a number as one of objects, and false if it cannot be one.
func count(o object) (int, bool) {
	v, ok := o.(float64)
	return int(max(0, min(v, maxObjects))), ok && v >= 0 && v <= maxObjects
}

// enterPacked notes one row of a cross-reference stream.
func (f *file) enterPacked(n int, row []byte, widths [3]int) {
	kind := 1
	if widths[0] > 0 {
		kind = number(row[:widths[0]])
	}
	second := number(row[widths[0] : widths[0]+widths[1]])
	switch kind {
	case 1:
		f.enter(n, entry{offset: second}, true)
	case 2:
		f.enter(n, entry{pack: second}, true)
	default:
		f.enter(n, entry{}, false)
	}
}

// number reads a big-endian number; what does not fit is no place in a file.
func number(b []byte) int {
	v := 0
	for _, c := range b {
		if v > 1<<40 {
			return 1 << 40
		}
		v = v<<8 | int(c)
	}
	return v
}
