// Package proof holds canonical JSON, signatures, the Merkle tree, and certificate records
// with their verification; standard library only.
package proof
