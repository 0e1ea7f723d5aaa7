module.exports = global.requireOutside('@electric-sql/pglite')
