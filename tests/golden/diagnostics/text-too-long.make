printf 'job: text-too-long\nset: {maker: x}\nplan: |\n'
yes '  The same line once more.' | head -n 40000
