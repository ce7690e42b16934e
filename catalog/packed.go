package catalog

import (
	"crypto/sha256"
	_ "embed"
	"encoding/binary"
	"io/fs"
	"sync"

	"parch/internal/document"
)

// packed holds the trees of the built-in YAML files, each under the SHA-256 of the
// file that it was made of: reading YAML takes most of the time of a short command.
// It is only ever a quicker way to the same tree. A file that has changed since is
// read as it stands, and a test asks for the trees to be written anew:
//
//	go test ./catalog -run Packed -update
//
//go:embed packed.bin
var packed string

// sum is the SHA-256 of a file.
type sum [sha256.Size]byte

// packedTrees finds the trees by the sum of their files. Each stands as its sum, its
// length and itself.
var packedTrees = sync.OnceValue(func() map[sum]string {
	trees := map[sum]string{}
	for rest := packed; len(rest) > sha256.Size+4; {
		length := int(binary.LittleEndian.Uint32([]byte(rest[sha256.Size:][:4])))
		tree := rest[sha256.Size+4:]
		if length > len(tree) {
			break
		}
		trees[sum([]byte(rest[:sha256.Size]))] = tree[:length]
		rest = tree[length:]
	}
	return trees
})

// parse reads a file of the catalog, by its tree where it is packed.
func parse(fsys fs.FS, name string) (*document.Node, error) {
	data, err := fs.ReadFile(fsys, name)
	if err != nil {
		return nil, err
	}
	if tree, ok := packedTrees()[sha256.Sum256(data)]; ok {
		if root, err := document.Unpack(name, tree); err == nil {
			return root, nil
		}
	}
	return document.Parse(name, data)
}

// Packed is what packed.bin holds for a catalog without problems.
func Packed(fsys fs.FS) ([]byte, error) {
	names, err := list(fsys)
	if err != nil {
		return nil, err
	}
	var all []byte
	for _, name := range names {
		data, err := fs.ReadFile(fsys, name)
		if err != nil {
			return nil, err
		}
		root, err := document.Parse(name, data)
		if err == nil {
			err = root.Problems().Err()
		}
		if err != nil {
			return nil, err
		}
		of, tree := sha256.Sum256(data), root.Pack(nil)
		all = append(all, of[:]...)
		all = binary.LittleEndian.AppendUint32(all, uint32(len(tree)))
		all = append(all, tree...)
	}
	return all, nil
}
