module.exports = { skipDownload: true };
