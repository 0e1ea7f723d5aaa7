module.exports = global.requireOutside('@seriousme/openapi-schema-validator')
