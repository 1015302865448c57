/** Words that stand at the beginning of every list of guesses: of keyboards, names, seasons, banks, football, feelings. */
export const commonWords: readonly string[] = (
	'password passwort passwd pass passphrase kennwort motdepasse contrasena senha parola secret geheim secure security ' +
	'login logon signin access account admin administrator root user username guest test testing tester demo default ' +
	'changeme change letmein welcome willkommen bienvenue hello hallo bonjour hola iloveyou ilove love liebe amour amor ' +
	'lovely sweet sweetheart baby babygirl angel princess prince queen king kingdom master mistress boss chief captain ' +
	'dragon monkey tiger lion eagle falcon wolf bear horse dog cat kitty puppy bird fish shark snake spider rabbit bunny ' +
	'panther cheetah dolphin turtle butterfly summer sommer winter spring autumn herbst fall january february march april ' +
	'june july august september october november december monday tuesday wednesday thursday friday saturday sunday ' +
	'morning evening night today tomorrow yesterday sunshine rainbow flower rose lily orchid daisy tulip sun moon star ' +
	'stars sky cloud ocean river mountain forest island desert snow rain storm thunder lightning fire water earth wind ' +
	'football fussball soccer baseball basketball hockey tennis golf rugby cricket boxing racing cycling running arsenal ' +
	'chelsea liverpool barcelona madrid juventus milan bayern dortmund schalke ajax benfica porto celtic rangers yankees ' +
	'michael michelle jennifer jessica ashley amanda daniel david robert john james william thomas joseph charles george ' +
	'peter paul mark luke matthew andrew anthony steven stephen richard christopher christian alexander alexandra anna ' +
	'maria martin markus stefan andreas sebastian tobias florian nicole sabine claudia monika petra susanne katharina ' +
	'pierre jean marie louis nicolas camille antoine julien thomas carlos jose juan pedro miguel antonio francisco sofia ' +
	'lucia carmen elena marco luca giovanni giuseppe francesco alessandro andrea paolo charlie jordan hunter taylor justin ' +
	'brandon tyler austin dakota cheyenne ginger pepper cookie coffee chocolate banana apple orange cherry lemon peach ' +
	'strawberry cheese pizza burger chicken bacon beer wine whiskey vodka money geld argent dinero cash bank banking ' +
	'banker finance financial credit debit loan mortgage deposit savings invest investment trading trader stock market ' +
	'capital risk model models validation validator auditor audit keelbook register office company business computer ' +
	'internet network server system systems windows microsoft apple google facebook amazon twitter instagram linkedin ' +
	'samsung nokia iphone android laptop keyboard mouse screen database oracle linux ubuntu debian code coder hacker ' +
	'matrix superman batman spiderman ironman avengers starwars pokemon naruto mustang ferrari porsche mercedes bmw audi ' +
	'toyota honda yamaha harley corvette camaro jaguar london paris berlin vienna zurich frankfurt munich hamburg rome ' +
	'madrid lisbon dublin amsterdam brussels newyork boston chicago texas california florida america england germany ' +
	'deutschland france italia spain espana europe africa asia china japan india russia brazil mexico canada australia ' +
	'freedom liberty peace hope faith trust trustno heaven jesus christ god lord blessed family mother father mama papa ' +
	'sister brother friend friends forever always never good great best super mega ultra happy lucky crazy funny cool ' +
	'sexy hot hottie beautiful pretty black white blue green yellow purple orange silver gold golden diamond crystal ' +
	'number one two three four five six seven eight nine ten hundred thousand million qwerty asdf zxcvbn azerty qwertz ' +
	'abc abcd abcdef aaa xxx the and for you your my our this that with from not but what when who how why yes'
).split(' ');
