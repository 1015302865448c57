/** Publication behind each check, as results cite it. */
export const sources: Readonly<Record<string, string>> = Object.freeze({
	'data.integrity': 'Rule of the policy',
	'integration.adf':
		'Dickey & Fuller 1979, JASA 74, 427-431; Said & Dickey 1984, Biometrika 71, 599-607; critical values MacKinnon 2010, Queen’s Economics WP 1227; p-values MacKinnon 1994, JBES 12, 167-176',
	'integration.kpss':
		'Kwiatkowski, Phillips, Schmidt & Shin 1992, J. Econometrics 54, 159-178, table 1; lag Hobijn, Franses & Ooms 2004, Statistica Neerlandica 58, 483-502',
	'integration.order':
		'Joint reading of Dickey-Fuller and KPSS, as in Kwiatkowski, Phillips, Schmidt & Shin 1992, J. Econometrics 54, 159-178',
	'cointegration.engle-granger':
		'Engle & Granger 1987, Econometrica 55, 251-276; critical values MacKinnon 2010, Queen’s Economics WP 1227',
	'cointegration.ecm-t':
		'Banerjee, Dolado & Mestre 1998, J. Time Series Analysis 19, 267-283; critical values simulated, agreeing with the I(1) bounds of Pesaran, Shin & Smith 2001, J. Applied Econometrics 16, 289-326',
	'cointegration.bounds':
		'Pesaran, Shin & Smith 2001, J. Applied Econometrics 16, 289-326; Narayan 2005, Applied Economics 37, 1979-1990',
	'adjustment.sign': 'Follows from the equation',
	'adjustment.significance':
		'Student t, meaningful once cointegration is shown; HAC errors Newey & West 1987, Econometrica 55, 703-708',
	'adjustment.half-life': 'Response of the equation to a shock',
	'long-run.signs': 'Signs declared beforehand',
	'long-run.range': 'Ranges declared beforehand',
	'long-run.precision':
		'Delta method, Bardsen 1989, Oxford Bulletin 51, 345-350; Fieller 1954, J. Royal Statistical Society B 16, 175-185',
	'replication.coefficients': 'Claimed figures with their digits',
	'residual.stationarity-refit':
		'Engle & Granger 1987, Econometrica 55, 251-276; critical values MacKinnon 2010, Queen’s Economics WP 1227',
	'residual.stationarity-held':
		'Dickey & Fuller 1979, JASA 74, 427-431; critical values MacKinnon 2010, Queen’s Economics WP 1227; KPSS 1992, J. Econometrics 54, 159-178',
	'residual.autocorrelation':
		'Breusch 1978, Australian Economic Papers 17, 334-355; Godfrey 1978, Econometrica 46, 1293-1301',
	'residual.portmanteau': 'Ljung & Box 1978, Biometrika 65, 297-303',
	'residual.arch': 'Engle 1982, Econometrica 50, 987-1007',
	'residual.heteroskedasticity':
		'Breusch & Pagan 1979, Econometrica 47, 1287-1294; Koenker 1981, J. Econometrics 17, 107-112',
	'residual.normality': 'Jarque & Bera 1987, International Statistical Review 55, 163-172',
	'residual.functional-form': 'Ramsey 1969, J. Royal Statistical Society B 31, 350-371',
	'design.collinearity': 'Belsley, Kuh & Welsch 1980, Regression Diagnostics',
	'design.degrees': 'Rule of the policy',
	'stability.cusum':
		'Brown, Durbin & Evans 1975, J. Royal Statistical Society B 37, 149-192; with lagged dependent variables Kraemer, Ploberger & Alt 1988, Econometrica 56, 1355-1369',
	'stability.cusumsq':
		'Brown, Durbin & Evans 1975, J. Royal Statistical Society B 37, 149-192; critical values Edgerton & Wells 1994, Oxford Bulletin 56, 355-365',
	'stability.sup-f': 'Andrews 1993, Econometrica 61, 821-856; p-values Hansen 1997, JBES 15, 60-67',
	'family.false-alarms': 'Holm 1979, Scandinavian J. Statistics 6, 65-70'
});
