package project

// Key describes one key of the project file, for guide and editors.
type Key struct {
	Table    string // such as "finish"; "" for the top of the file
	List     bool   // the table is written [[finish]]
	Type     string // the type of finish that has the key; "" for all
	Name     string
	About    string
	Want     string // values allowed
	Required bool
	Default  string // as TOML; "" for none
	Source   string // of the default
	quiet    bool
}

// Keys are all keys, in the schema's order.
func Keys() []Key {
	list := keysOf(section{keys: describe(projectKeys)})
	for _, s := range sections() {
		list = append(list, keysOf(s)...)
	}
	return list
}

// Defaults are the keys whose default a run has to state: all but those whose
// default leaves everything as it would be without the key.
func Defaults() []Key {
	var list []Key
	for _, k := range Keys() {
		if k.Default != "" && !k.quiet {
			list = append(list, k)
		}
	}
	return list
}

func keysOf(s section) []Key {
	var list []Key
	add := func(kind string, keys []described) {
		for _, k := range keys {
			list = append(list, Key{Table: s.name, List: s.list, Type: kind, Name: k.name, About: k.about,
				Want: k.want(k.field), Required: k.required, Default: k.def, Source: k.source, quiet: k.quiet})
		}
	}
	add("", s.keys)
	for _, v := range s.variants {
		add(v.name, v.keys)
	}
	return list
}
