package catalog

import (
	_ "embed"
	"slices"
	"strings"
)

// nameList holds a line for each solvent: its key, its name, its aliases and its CAS
// number, parted by semicolons. It is written with packed.bin and only ever a quicker way to a file.
//
//go:embed names.txt
var nameList string

// keyNamed finds the key of a solvent by key, name, alias or CAS number; case does not count.
func keyNamed(name string) (key string, ok bool) {
	name = strings.TrimSpace(name)
	for line := range strings.Lines(nameList) {
		words := strings.Split(strings.TrimSpace(line), ";")
		if slices.ContainsFunc(words, func(word string) bool { return strings.EqualFold(word, name) }) {
			return words[0], true
		}
	}
	return "", false
}

// stepFiles are what one step asks for beside the solvents.
var stepFiles = []string{
	agentsFile, apparatusFile, assaysFile, carriersFile, cautionsFile, dateFile, diameterFile, doubtFile, historiesFile, matrixFile,
	practiceFile, sourcesFile,
}

// LoadFor returns the part of the built-in catalog that one step asks for, in a
// fraction of the time of Load: of the solvents only those named, and water, and
// neither prices nor emissions. What it holds is what Load holds. ok is false where
// a name is not known or a file has a problem, which Load then tells.
func LoadFor(solvents ...string) (cat *Catalog, ok bool) {
	names := slices.Clone(stepFiles)
	wanted := map[string]bool{waterKey: true}
	for _, name := range solvents {
		key, ok := keyNamed(name)
		if !ok {
			return nil, false
		}
		wanted[key] = true
	}
	for _, key := range keysOf(wanted) {
		names = append(names, solventFile(key))
	}
	s := newShelf(names)
	s.open(files)
	if s.err() != nil {
		return nil, false
	}
	s.readSome(wanted)
	return s.cat, s.err() == nil
}

// readSome reads the files on a shelf without those of most solvents. While it does,
// others may speak of these by key.
func (s *shelf) readSome(wanted map[string]bool) {
	s.readSources()
	s.readDate()
	s.readPractice()
	s.readDoubts()
	s.readSolvents()
	for line := range strings.Lines(nameList) {
		if key, _, _ := strings.Cut(strings.TrimSpace(line), ";"); s.cat.Solvents[key] == nil {
			s.cat.Solvents[key] = &Solvent{Key: key}
		}
	}
	s.readAgents()
	s.readMatrix()
	s.readHistories()
	s.readApparatus()
	s.readAssays()
	s.readCautions()
	s.readDiameters()
	s.readCarriers()
	if len(wanted) > 2 { // a solvent, water and a carrier
		s.readTables(files)
	}
	for key := range s.cat.Solvents {
		if !wanted[key] {
			delete(s.cat.Solvents, key)
		}
	}
}

// Names is what names.txt holds for a catalog.
func Names(cat *Catalog) []byte {
	var list strings.Builder
	for _, key := range keysOf(cat.Solvents) {
		v := cat.Solvents[key]
		list.WriteString(strings.Join(v.calledAll(), ";") + "\n")
	}
	return []byte(list.String())
}
