package json_test

import (
	"fmt"
	"os"

	"shearbook/profile"
	"shearbook/profile/json"
)

// A slip in a key is found at its place.
func ExampleRead() {
	_, err := json.Read("l1.json", []byte(`{
  "shearbook profiles": 1,
  "profiles": [{"name": "L1", "layers": [
    {"top_m": 0, "bottom_m": null, "vs_mp": 300}
  ]}]
}`))
	fmt.Println(err)
	fmt.Println(err.(profile.Faults)[1].Hint)
	// Output:
	// l1.json:4:5: the layer has no key "vs_mps"
	// l1.json:4:36: key "vs_mp" is not known in a layer
	// is vs_mps meant?
}

func ExampleWrite() {
	json.Write(os.Stdout, []profile.Profile{{
		Name:   "L1",
		Survey: profile.Survey{Method: "MASW", Basis: profile.Inverted},
		Layers: []profile.Layer{{Bottom: 4.5, Vs: 180}},
	}})
	// Output:
	// {
	//   "shearbook profiles": 1,
	//   "profiles": [
	//     {
	//       "name": "L1",
	//       "survey": {"method": "MASW", "basis": "inverted"},
	//       "layers": [
	//         {"top_m": 0, "bottom_m": 4.5, "vs_mps": 180}
	//       ]
	//     }
	//   ]
	// }
}
