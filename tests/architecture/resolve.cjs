// How the import check finds `$lib`: the one alias of the project.
module.exports = { resolve: { alias: { $lib: require('node:path').resolve(__dirname, '../../src/lib') } } };
