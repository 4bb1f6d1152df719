package plan

// BundleFolder returns the place of the bundle.
func (p *Plan) BundleFolder() string {
	return p.File(orElse(p.Bundle.Folder, "bundle"))
}
