package gen

// Files returns every file of the samples with its content, named by its path
// below the samples' folder.
func Files() map[string][]byte {
	files := map[string][]byte{}
	for name, text := range pitFiles() {
		files["gravel-pit/"+name] = text
	}
	for name, text := range landfillFiles() {
		files["landfill/"+name] = text
	}
	return files
}
