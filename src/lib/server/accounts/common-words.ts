/*
 * Building blocks of the passwords that guessing programs try first: written down from common knowledge, no list was
 * copied. Whole common passwords of 15 characters and more are nearly all made of these, of repeats and of keys in a row.
 */
// prettier-ignore
export const commonWords: readonly string[] = [
	'password', 'passwort', 'passw0rd', 'p455w0rd', 'pa55word', 'kennwort', 'motdepasse', 'contrasena', 'parola',
	'passphrase', 'passcode', 'letmein', 'welcome', 'welcome1', 'admin', 'administrator', 'root', 'user', 'login',
	'guest', 'test', 'testing', 'default', 'changeme', 'secret', 'master', 'access', 'iloveyou', 'ilove', 'loveyou',
	'love', 'lovely', 'forever', 'princess', 'prinzessin', 'sunshine', 'shadow', 'monkey', 'dragon', 'football',
	'baseball', 'basketball', 'soccer', 'hockey', 'golf', 'tennis', 'superman', 'batman', 'spiderman', 'starwars',
	'trustno1', 'whatever', 'freedom', 'ninja', 'mustang', 'ferrari', 'porsche', 'mercedes', 'chelsea', 'arsenal',
	'liverpool', 'barcelona', 'realmadrid', 'juventus', 'michael', 'jordan', 'jessica', 'jennifer', 'ashley',
	'daniel', 'andrew', 'joshua', 'matthew', 'thomas', 'charlie', 'robert', 'george', 'hunter', 'killer', 'pepper',
	'ginger', 'cookie', 'summer', 'winter', 'spring', 'autumn', 'monday', 'friday', 'sunday', 'january', 'august',
	'september', 'october', 'november', 'december', 'qwerty', 'qwertz', 'azerty', 'asdf', 'zxcvbn', 'abc', 'hello',
	'hallo', 'bonjour', 'please', 'computer', 'internet', 'windows', 'google', 'facebook', 'samsung', 'iphone',
	'apple', 'android', 'pokemon', 'minecraft', 'naruto', 'matrix', 'phoenix', 'angel', 'jesus', 'jesuschrist',
	'heaven', 'blessed', 'family', 'mother', 'father', 'babygirl', 'baby', 'sweetheart', 'butterfly', 'flower',
	'chocolate', 'cheese', 'banana', 'orange', 'purple', 'yellow', 'silver', 'golden', 'diamond', 'eagle', 'tiger',
	'money', 'dollar', 'million', 'lucky', 'happy', 'london', 'paris', 'berlin', 'newyork', 'america', 'england',
	'correcthorsebatterystaple', 'tobeornottobe', 'onceuponatime', 'maytheforcebewithyou', 'openthedoor',
	'thisismypassword', 'mypassword', 'thequickbrownfox', 'jumpsoverthelazydog', 'nopassword', 'fuckyou', 'asshole'
];
