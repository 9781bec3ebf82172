-- Starts the language server of Topheavy for every `*.stack.toml`. Neovim 0.7 and later; `topheavy` must be on the path.

local config = { name = 'topheavy', cmd = { 'topheavy', 'serve' } }

-- Neovim 0.7 does not yet find out by itself that one server is enough for all files.
local running

local function attach(event)
  config.root_dir = vim.fn.fnamemodify(event.file, ':p:h')
  if vim.lsp.start then
    return vim.lsp.start(config, { bufnr = event.buf })
  end
  if not (running and vim.lsp.get_client_by_id(running)) then
    running = vim.lsp.start_client(config)
  end
  if running then
    vim.lsp.buf_attach_client(event.buf, running)
  end
end

vim.api.nvim_create_autocmd({ 'BufRead', 'BufNewFile' }, {
  group = vim.api.nvim_create_augroup('topheavy', {}),
  pattern = '*.stack.toml',
  -- Only once the buffer is whole: before that it has no type.
  callback = function(event) vim.schedule(function() attach(event) end) end,
})
