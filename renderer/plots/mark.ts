// The page's own stylesheet holds the few rules that plotly would write into the page, and no map is ever
// drawn: elements of these names, there before plotly is run, tell it not to write its own. The second is
// the name it gives the rules of its map library; another version may need another, which the test of
// the page's content security policy finds.
for (const name of [
  'plotly.js-style-global',
  'ce8d464691048653ffe3a57c6c18ab566e8366f186677868cf724621a857b4fe',
]) {
  if (document.getElementById(name)) continue;
  const mark = document.createElement('div');
  mark.id = name;
  mark.className = 'no-inline-styles';
  mark.hidden = true;
  document.body.append(mark);
}

export {};
