-- Opens the file that the command line names, makes one mend and one change that the server offers, and writes it.
-- Says on standard output what it saw; `tests/tests/neovim.rs` reads that. Runs in Neovim 0.7 and later, after
-- `editors/neovim/topheavy.lua` has started the server.

local LONG = 60000 -- ms; the first check on a busy machine

local function say(word, text)
  io.stdout:write(word .. ' ' .. text .. '\n')
end

-- The client that the set-up has started for this buffer.
local function topheavy()
  for _, client in pairs(vim.lsp.buf_get_clients(0)) do
    if client.name == 'topheavy' then
      return client
    end
  end
end

local function rule(diagnostic)
  return diagnostic.code or diagnostic.user_data.lsp.code
end

local function finding(name)
  for _, diagnostic in ipairs(vim.diagnostic.get(0)) do
    if rule(diagnostic) == name then
      return diagnostic
    end
  end
end

local function errors()
  return vim.diagnostic.get(0, { severity = vim.diagnostic.severity.ERROR })
end

local function wait(what, condition)
  if not vim.wait(LONG, condition, 10) then
    error('waited in vain for ' .. what)
  end
end

local function actions_at(diagnostic)
  local params = {
    textDocument = vim.lsp.util.make_text_document_params(),
    range = {
      start = { line = diagnostic.lnum, character = diagnostic.col },
      ['end'] = { line = diagnostic.lnum, character = diagnostic.col },
    },
    context = { diagnostics = {} },
  }
  for _, answer in pairs(vim.lsp.buf_request_sync(0, 'textDocument/codeAction', params, LONG) or {}) do
    return answer.result or {}
  end
  return {}
end

-- Waits for an action that is wanted, and makes its edit.
local function apply(client, diagnostic, what, is_wanted)
  local chosen
  wait(what, function()
    for _, action in ipairs(actions_at(diagnostic)) do
      if is_wanted(action) then
        chosen = action
        return true
      end
    end
  end)
  vim.lsp.util.apply_workspace_edit(chosen.edit, client.offset_encoding)
  say('applied', chosen.title)
end

local function work()
  wait('the server', topheavy)
  local client = topheavy()
  wait('a misspelt key', function() return finding('key-not-known') end)
  for _, diagnostic in ipairs(vim.diagnostic.get(0)) do
    say('found', string.format('%s %s %d', diagnostic.source, rule(diagnostic), diagnostic.lnum + 1))
  end
  apply(client, finding('key-not-known'), 'a mend', function(action) return action.isPreferred end)
  wait('the end of the misspelt key', function() return not finding('key-not-known') end)

  wait('a fall', function() return finding('interface-falls') end)
  for _, diagnostic in ipairs(vim.diagnostic.get(0)) do
    say('then', string.format('%s %s %d', diagnostic.source, rule(diagnostic), diagnostic.lnum + 1))
  end
  apply(client, finding('interface-falls'), 'a change of the drive', function(action)
    return not action.isPreferred and action.title:find('acceleration', 1, true)
  end)
  wait('the end of every error', function() return #errors() == 0 end)
  vim.cmd('write')

  vim.lsp.stop_client(client.id)
  wait('the end of the server', function() return not vim.lsp.get_client_by_id(client.id) end)
  say('ended', 'well')
end

local ok, reason = pcall(work)
if not ok then
  say('failed', tostring(reason))
end
vim.cmd(ok and 'qall!' or 'cquit!')
